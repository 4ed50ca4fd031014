import type { WantedView } from '#shared/contract/views'
import type { Rubric } from '#shared/domain/rubric/criterion'
import type { EvidenceSet } from '#shared/domain/rubric/evidence'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { wantedOf } from '#shared/domain/rubric/wanted'

/**
 * The wanted proof of the part the evidence was gathered for. A whole map or schedule (every wall spot of the card, every station) is
 * told spot by spot, so that the pad can go from one to the next.
 */
export function wantedViews(rubric: Rubric, evidence: EvidenceSet): WantedView[] {
  return wantedOf(stageAsDue(rubric, evidence.op), evidence).flatMap(({ spotsLeft, ...item }): WantedView[] => {
    const { kind, view, viewName, quantity, title, cylinder, side, spot, when, note, count, have, criteria } = item
    const wanted = { kind, view, viewName, quantity, title, cylinder, side, spot, when, note, count, have, criteria }
    if (spotsLeft.length === 0) return [wanted]
    return [...(have > 0 ? [wanted] : []), ...spotsLeft.map(one => ({ ...wanted, spot: one, count: 1, have: 0 }))]
  })
}
