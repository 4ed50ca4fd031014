/**
 * A cell or heading in one plain spelling: H₂O as H2O, every quote for inches as ", every minus as -, one space between words.
 *
 * Case is kept; the vocabularies fold it themselves.
 */
export function plainText(text: string): string {
  return text
    .replace(/[\u2033\u201C\u201D\u201E]|''/g, '"')
    .replace(/[\u2018\u2019\u2032]/g, '\'')
    // Kept apart, or 1½ would come out as 11/2.
    .replace(/(\d)([\u00BC-\u00BE\u2150-\u215E])/g, '$1 $2')
    .normalize('NFKC')
    .replace(/[\u2044]/g, '/')
    .replace(/[\u2212\u2012\u2013\u2014]/g, '-')
    .replace(/[\u2206]/g, '\u0394')
    .replace(/\u0394\s*p/gi, 'dp')
    .replace(/[\uFEFF\u200B\p{Cc}]/gu, ' ')
    .replace(/\s/g, ' ')
    .trim()
}
