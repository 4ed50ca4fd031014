const ofOurs = /^(\/lessons\/[a-z0-9-]{1,80})?(#[a-z0-9-]{1,120})?$/

/**
 * Whether a lesson may link there: http, https, mailto, another lesson of ours, or a heading of the same lesson. Nothing that runs, and
 * nothing that reads as one address and goes to another (spaces, control characters, a name and password before the host).
 */
export function isLessonLink(href: string): boolean {
  if (href === '' || href.length > 2000 || /[\s\p{Cc}\\]/u.test(href)) return false
  if (ofOurs.test(href)) return true
  if (!/^(https?:\/\/|mailto:)/i.test(href) || !URL.canParse(href)) return false
  const { protocol, username, password } = new URL(href)
  return ['http:', 'https:', 'mailto:'].includes(protocol) && username === '' && password === ''
}
