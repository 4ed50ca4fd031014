import type { Letter } from '../letter'

export interface Stopped {
  first: string
  head: string
  where: string
  /** A wall or a leak: its own words come first (handbook 7). */
  wallOrLeak: boolean
  /** "Wall least at the pinch is 3.10 mm, limit 3.5 mm, doubt 0.15 mm", or null where nothing was measured. */
  measured: string | null
  reason: string
  instructor: string
  nothingElse: boolean
  url: string
}

/** Message 10: stop. */
export function stopped(given: Stopped): Letter {
  return {
    subject: `Stop cutting ${given.head} ${given.where} until we have spoken`,
    paragraphs: [
      ...(given.wallOrLeak ? [{ text: 'Pressure test before anything else. This estimate has a doubt; the metal may be worse.', strong: true }] : []),
      { text: given.measured === null ? `${given.first}, stop there.` : `${given.first}, ${given.measured}. Stop there.`, strong: true },
      ...(given.reason === '' ? [] : [{ text: given.reason }]),
      { text: `${given.instructor} will find you.${given.nothingElse ? ' Nothing else is wrong.' : ''}` },
    ],
    action: { label: 'See where', url: given.url },
    from: given.instructor,
  }
}
