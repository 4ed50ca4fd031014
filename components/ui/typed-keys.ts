/** Longest reading that is taken: nothing on a dial is longer. */
const longest = 12

/**
 * What stands on the pad after a key. Keys are digits, the decimal sign ("." or ","), "-" (changes the sign) and "back".
 * A key that makes no number is refused by changing nothing: a second decimal sign, a minus where none can be.
 *
 * @example
 * typeKey('41.9', '8', { decimal: '.', minus: false }) // => '41.98'
 */
export function typeKey(text: string, key: string, options: { decimal: '.' | ',', minus: boolean }): string {
  if (key === 'back') return text.slice(0, -1)
  if (key === '-') {
    if (!options.minus) return text
    return text.startsWith('-') ? text.slice(1) : `-${text}`
  }
  if (text.length >= longest) return text
  if (key === '.' || key === ',') {
    if (/[.,]/.test(text)) return text
    const start = text === '' || text === '-' ? `${text}0` : text
    return `${start}${options.decimal}`
  }
  return /^\d$/.test(key) ? text + key : text
}
