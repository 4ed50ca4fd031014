import type { Criterion, CriterionState } from './criterion'
import { instructorGives } from './instructor-gives'

/** What a reviewer asks for: the machine's state, the state wanted, and why. */
export interface WantedOverride { criterion: Criterion, from: CriterionState, to: CriterionState, reason: string }

const ladder: readonly CriterionState[] = ['accept', 'borderline', 'reject']

/**
 * Why an override is not allowed, as a sentence; null when it is.
 *
 * An override moves a state one step (accept - borderline - reject), carries a reason, never lifts a stop (that takes a new reading),
 * and neither sets nor lifts *does not apply*, which is the rubric's. A criterion that is the instructor's to give (judged, or a
 * photo's yes or no) and that nobody has given yet takes any state; a measured one that is not assessed needs its evidence.
 *
 * Source: handbook 3.1, consequences.
 */
export function overrideRefusal({ criterion, from, to, reason }: WantedOverride): string | null {
  if (from === 'does-not-apply' || to === 'does-not-apply') return `${criterion.id}: "does not apply" is set by the rubric, never by hand.`
  if (!ladder.includes(to)) return `${criterion.id}: an override gives accept, borderline or reject.`
  if (reason.trim() === '') return `${criterion.id}: say why; the reason is kept with your name.`
  if (from === 'not-assessed') {
    return instructorGives(criterion) ? null : `${criterion.id} was not assessed: it needs its evidence, not an override.`
  }
  const step = ladder.indexOf(to) - ladder.indexOf(from)
  if (step === 0) return `${criterion.id} is ${to} already.`
  if (criterion.safetyStop && step < 0) return `${criterion.id} is a stop: an override cannot lift it, a new reading can.`
  if (Math.abs(step) > 1) return `${criterion.id}: an override moves one step, and ${from} to ${to} is two.`
  return null
}
