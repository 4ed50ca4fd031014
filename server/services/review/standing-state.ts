import type { CriterionState } from '#shared/domain/rubric/criterion'
import type { StandingRow } from './point-results'

/** The state that counts: the person's where there is one, else the machine's. */
export function standingState({ result, override }: StandingRow): CriterionState {
  return override?.state ?? result.state
}
