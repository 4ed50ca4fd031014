import type { Letter } from '../letter'

export interface HoldReleased {
  head: string
  /** "Hold 4". */
  point: string
  instructor: string
  /** School's time, as people write it. */
  at: string
  /** The instructor's own, and those the program added. */
  conditions: string[]
  /** Next stroke as whole sentences, or null after the last stage. */
  next: string | null
  lesson: { number: number, title: string } | null
  feedback: string
  url: string
}

/** Message 9: hold released. */
export function holdReleased(given: HoldReleased): Letter {
  const withCondition = given.conditions.length === 0 ? '' : given.conditions.length === 1 ? ' with a condition' : ' with conditions'
  return {
    subject: `${given.point}: released - you may go on`,
    paragraphs: [
      { text: `${given.instructor} released ${given.point} of ${given.head} at ${given.at}${withCondition}${withCondition === '' ? '.' : ':'}`, items: given.conditions },
      ...(given.feedback === '' ? [] : [{ text: given.feedback }]),
      ...(given.next === null ? [] : [{ text: `Next stroke: ${given.next}${given.lesson === null ? '' : ` Read lesson ${given.lesson.number}, ${given.lesson.title}, first.`}`, strong: true }]),
    ],
    action: { label: 'Read the feedback', url: given.url },
    from: given.instructor,
  }
}
