/**
 * Words as they stand in an address: small letters, digits and hyphens; "part" where nothing is left.
 *
 * @example
 * headingAddress('Where the ball must touch') // => 'where-the-ball-must-touch'
 */
export function headingAddress(words: string): string {
  const id = words.normalize('NFKD').replaceAll(/\p{M}/gu, '').toLowerCase().replaceAll(/[’']/g, '').replaceAll(/[^a-z0-9]+/g, '-').replaceAll(/^-|-$/g, '')
  return id.slice(0, 80).replace(/-$/, '') || 'part'
}
