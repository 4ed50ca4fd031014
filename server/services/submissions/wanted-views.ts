import type { WantedView } from '#shared/contract/views'
import type { Rubric } from '#shared/domain/rubric/criterion'
import type { EvidenceSet } from '#shared/domain/rubric/evidence'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { wantedOf } from '#shared/domain/rubric/wanted'

/** The wanted proof of the part the evidence was gathered for. */
export function wantedViews(rubric: Rubric, evidence: EvidenceSet): WantedView[] {
  return wantedOf(stageAsDue(rubric, evidence.op), evidence).map(({ kind, view, viewName, quantity, title, cylinder, side, spot, when, note, count, have, criteria }) =>
    ({ kind, view, viewName, quantity, title, cylinder, side, spot, when, note, count, have, criteria }))
}
