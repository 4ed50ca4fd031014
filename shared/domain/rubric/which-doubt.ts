import type { Criterion } from './criterion'

/** Units of counts and yes/no, which have no doubt. */
const withoutDoubt = new Set(['count', 'yes/no', 'points', 'stations'])

/**
 * The U that decides: the evaluator's own where it has one, never less than the rubric's; the rubric's otherwise.
 *
 * Counts and yes/no have none (null), and so has a value nobody gave a doubt.
 *
 * Units: those of the value; k = 2. A relative U of the rubric is per cent of the value.
 * Source: handbook 3.1, "Which U".
 *
 * @throws {RangeError} when the evaluator's standard uncertainty is negative or not finite
 */
export function whichDoubt(criterion: Criterion, value: number, standardUncertainty: number | null): number | null {
  if (standardUncertainty !== null && !(standardUncertainty >= 0 && Number.isFinite(standardUncertainty))) throw new RangeError('whichDoubt requires a standard uncertainty of at least zero')
  if (withoutDoubt.has(criterion.unit)) return null
  const written = criterion.expandedU
  const ofRubric = written === null ? null : written.relative ? Math.abs(value) * written.value / 100 : written.value
  if (standardUncertainty === null) return ofRubric
  return Math.max(2 * standardUncertainty, ofRubric ?? 0)
}
