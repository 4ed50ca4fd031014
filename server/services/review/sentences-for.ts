import type { Review } from '#server/db/entities/Review'
import { Refusal } from '#server/utils/refusal'
import type { ReviewInput } from '#shared/contract/inputs'
import type { Criterion } from '#shared/domain/rubric/criterion'
import { instructorGives } from '#shared/domain/rubric/instructor-gives'
import { sameSpot } from '#shared/domain/rubric/same-spot'
import { sentence } from '#shared/domain/rubric/sentence'
import type { StandingRow } from './point-results'
import { spotOf } from './result-spot'
import { standingState } from './standing-state'

type Edited = NonNullable<ReviewInput['sentences']>[number]

/**
 * Sentences as the student gets them: the program's, or the instructor's where one was edited.
 *
 * A result that does not apply says nothing, nor does a judged one nobody gave. Where a person moved a state, the library's plain
 * sentence for the new state stands with the reason, because the program's own would contradict it.
 *
 * @throws {Refusal} input_invalid for a sentence of a result the review has not
 */
export function sentencesFor(rows: readonly StandingRow[], criteria: readonly Criterion[], edited: readonly Edited[]): Review['sentences'] {
  const isOf = ({ result }: StandingRow, one: Edited): boolean => result.criterion === one.criterion && (result.cylinder ?? null) === one.cylinder && (result.side ?? null) === one.side && sameSpot(result.at ?? null, one.at)
  edited.forEach((one, index) => {
    if (!rows.some(row => isOf(row, one))) throw new Refusal('input_invalid', undefined, { issues: [{ path: `sentences.${index}`, message: 'is of no result here' }] })
  })
  return rows.flatMap((row) => {
    const criterion = criteria.find(one => one.id === row.result.criterion)
    const state = standingState(row)
    if (!criterion || state === 'does-not-apply' || (instructorGives(criterion) && state === 'not-assessed')) return []
    const proposal = proposedSentence(criterion, row)
    const own = edited.find(one => isOf(row, one))?.text
    const text = own === undefined || own === '' ? proposal : own
    return [{ criterion: criterion.id, title: criterion.title, ...spotOf(row.result), state, text, edited: text !== proposal }]
  })
}

/** The sentence the program proposes for a result as it stands. */
export function proposedSentence(criterion: Criterion, { result, override }: StandingRow): string {
  if (!override || override.state === result.state) return result.text
  const library = sentence(criterion, { state: override.state, end: null, finding: null, value: result.value ?? null, expandedUncertainty: result.expandedUncertainty ?? null, limit: null, at: result.at ?? null, fill: {}, plain: true })
  return `${library} ${override.reason}`.trim()
}
