import type { CriterionState } from '#shared/domain/rubric/criterion'

/** The five states of a criterion as they are written, everywhere. */
export const stateWords: Record<CriterionState, string> = {
  'accept': 'Accept',
  'borderline': 'Borderline',
  'reject': 'Reject',
  'not-assessed': 'Not assessed',
  'does-not-apply': 'Does not apply',
}
