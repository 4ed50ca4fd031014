const letters = [...'abcdefghijklmnopqrstuvwxyz']

/**
 * Every spelling one slip of the hand from a word: two letters swapped, one left out, one too many, one wrong. About 54 for each
 * letter; words longer than anybody mistypes by one letter get none.
 *
 * @example
 * oneSlipAway('lihgt').includes('light') // => true
 */
export function oneSlipAway(word: string): string[] {
  if (word.length < 3 || word.length > 20) return []
  const made = new Set<string>()
  for (let at = 0; at <= word.length; at += 1) {
    const [before, after] = [word.slice(0, at), word.slice(at)]
    if (after.length > 1) made.add(`${before}${after[1]}${after[0]}${after.slice(2)}`)
    if (after !== '') made.add(before + after.slice(1))
    for (const letter of letters) {
      made.add(before + letter + after)
      if (after !== '') made.add(before + letter + after.slice(1))
    }
  }
  made.delete(word)
  return [...made]
}
