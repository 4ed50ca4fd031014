import type { Criterion } from './criterion'

/** Whether a criterion is the instructor's to give where nobody measured it: judged ones, and a photo's yes or no, for which there is no figure to type. */
export function instructorGives(criterion: Criterion): boolean {
  return criterion.kind === 'judged' || (criterion.kind === 'photo-measured' && criterion.unit === 'yes/no')
}
