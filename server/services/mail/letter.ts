/**
 * A message as its template writes it: plain, short, one action. Both of its forms, HTML and plain text, are made from this,
 * so they never say different things.
 */
export interface Letter {
  subject: string
  /** Paragraphs in order. A strong one stands out; a list follows its paragraph. */
  paragraphs: { text: string, strong?: boolean, items?: string[] }[]
  action: { label: string, url: string } | null
  /** Who it is from, last line. */
  from: string
}
