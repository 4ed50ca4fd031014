import type { Letter } from '../letter'

export interface StopWork {
  head: string
  where: string
  officer: string
  at: string
  reason: string
  url: string
}

/** Message 13: the safety officer stopped work. */
export function stopWork(given: StopWork): Letter {
  return {
    subject: `${given.head}: stop`,
    paragraphs: [
      { text: `${given.officer} stopped work on ${given.head} (${given.where}) at ${given.at}: ${given.reason}`, strong: true },
      { text: `Restart by ${given.officer} only.` },
    ],
    action: { label: 'See the head', url: given.url },
    from: given.officer,
  }
}
