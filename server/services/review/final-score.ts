import type { Submission } from '#server/db/entities/Submission'
import { criteriaOfPart } from '#shared/domain/rubric/covers'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { score } from '#shared/domain/rubric/score'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { word } from '#shared/domain/rubric/word'
import type { StandingRow } from './point-results'
import { standingState } from './standing-state'

/** Score and word of a submission as the person leaves it. `rows` are its own results, all of them. */
export function finalScore(rubric: Rubric, submission: Submission, rows: readonly StandingRow[]): { score: number | null, word: string } {
  const criteria = criteriaOfPart(stageAsDue(rubric, submission.op), submission.part)
  const results = rows.map(row => ({ criterion: row.result.criterion, state: standingState(row) })).filter(result => criteria.some(criterion => criterion.id === result.criterion))
  return { score: score(results, criteria), word: word(results, criteria) }
}
