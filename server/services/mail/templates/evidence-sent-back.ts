import type { Letter } from '../letter'

export interface EvidenceSentBack {
  first: string
  head: string
  stage: string
  instructor: string
  accepted: number
  assessed: number
  /** What needs another go: the criterion's title with its spot, and the sentence for the student. */
  redo: { criterion: string, text: string }[]
  /** Where nothing may be cut meanwhile; empty when nothing of it is about metal. */
  where: string[]
  feedback: string
  url: string
}

/** Message 8: evidence sent back. */
export function evidenceSentBack(given: EvidenceSentBack): Letter {
  const { redo } = given
  return {
    subject: `${given.head} ${given.stage}: ${redo.length > 1 ? `${numberWord(redo.length)} things` : 'one thing'} to redo`,
    paragraphs: [
      { text: `${given.first}, ${given.accepted} of ${given.assessed} accepted.${redo.length > 0 ? ' This needs another go:' : ''}`, items: redo.map(({ criterion, text }) => `${criterion}. ${text}`) },
      ...(given.feedback === '' ? [] : [{ text: given.feedback }]),
      { text: given.where.length > 0 ? `Don't cut at ${given.where.join('; ')} until it is released.` : 'Don\'t cut past this point until it is released.', strong: true },
    ],
    action: { label: 'See what was said', url: given.url },
    from: given.instructor,
  }
}

function numberWord(count: number): string {
  return ['', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'][count] ?? String(count)
}
