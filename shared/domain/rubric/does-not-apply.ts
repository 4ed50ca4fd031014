import type { Criterion } from './criterion'
import type { EvidenceSet } from './evidence'

/**
 * Why a criterion does not apply to this head, in the rubric's words; null when it applies.
 *
 * By casting scope, or by the one circumstance the rubric names: a core that did not come from acid cleaning. Where nobody
 * has said how it was cleaned the criterion is taken to apply; only a plain "no" lifts it.
 *
 * Source: handbook 3.1: a state set by the rubric and never by hand.
 */
export function doesNotApplyBecause(criterion: Criterion, evidence: Pick<EvidenceSet, 'casting' | 'acidCleaned'>): string | null {
  for (const { scope, when, because } of criterion.doesNotApply ?? []) {
    if (scope !== undefined && scope === evidence.casting.scope) return because
    if (when !== undefined && /acid cleaning/.test(when) && evidence.acidCleaned === false) return because
  }
  return null
}
