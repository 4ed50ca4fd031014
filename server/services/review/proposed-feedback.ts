import { firstName } from '#server/services/mail/first-name'
import type { CriterionView } from '#shared/contract/views'
import { listInWords } from '#shared/domain/rubric/words'

const mostNamed = 4

/** First words for the instructor to change: how many were accepted, and what needs another look. The sentences stand beside it. */
export function proposedFeedback(student: string, criteria: readonly CriterionView[]): string {
  const assessed = criteria.filter(criterion => criterion.state !== 'does-not-apply')
  const accepted = assessed.filter(criterion => criterion.state === 'accept')
  const open = assessed.filter(criterion => criterion.state === 'reject' || criterion.state === 'borderline')
  const wanting = assessed.filter(criterion => criterion.state === 'not-assessed' && criterion.kind !== 'judged' && criterion.unit !== 'yes/no')
  const named = (some: readonly CriterionView[]): string => listInWords([...some.slice(0, mostNamed).map(criterion => lowerFirst(criterion.title)), ...(some.length > mostNamed ? [`${some.length - mostNamed} more`] : [])])
  return [
    `${firstName(student)}, ${accepted.length} of ${assessed.length} accepted.`,
    ...(open.length > 0 ? [`Look at ${named(open)}.`] : []),
    ...(wanting.length > 0 ? [`Still to be shown: ${named(wanting)}.`] : []),
  ].join(' ')
}

function lowerFirst(text: string): string {
  // A name or an abbreviation keeps its capital.
  return /^[A-Z][a-z]/.test(text) ? text.charAt(0).toLowerCase() + text.slice(1) : text
}
