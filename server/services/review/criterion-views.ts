import type { CriterionResult } from '#server/db/entities/CriterionResult'
import type { Override } from '#server/db/entities/Review'
import type { CriterionView, ResultView } from '#shared/contract/views'
import type { Criterion, Rubric } from '#shared/domain/rubric/criterion'
import { worstState } from '#shared/domain/rubric/worst-state'
import type { StandingRow } from './point-results'
import { standingState } from './standing-state'

/**
 * Criteria with their results as people see them, stops first and then in the rubric's order. A criterion's state is its worst
 * result's; the machine's own is kept beside the person's.
 */
export function criterionViews(rubric: Rubric, criteria: readonly Criterion[], rows: readonly StandingRow[]): CriterionView[] {
  const views = criteria.flatMap((criterion): CriterionView[] => {
    const own = rows.filter(row => row.result.criterion === criterion.id)
    const stage = rubric.stages.find(one => one.criteria.some(known => known.id === criterion.id))
    if (own.length === 0 || !stage) return []
    return [{
      id: criterion.id,
      title: criterion.title,
      kind: criterion.kind,
      unit: criterion.unit,
      weight: criterion.weight,
      must: criterion.mustPass,
      stop: criterion.safetyStop,
      state: worstState(own.map(standingState)),
      machineState: worstState(own.map(row => row.result.state)),
      stage: { op: stage.op, code: stage.code },
      results: own.map(({ result, override }) => resultView(result, override)),
    }]
  })
  return [...views.filter(view => view.stop), ...views.filter(view => !view.stop)]
}

function resultView(result: CriterionResult, override: Override | null): ResultView {
  return {
    id: result.id,
    cylinder: result.cylinder ?? null,
    side: result.side ?? null,
    at: result.at ?? null,
    liftMm: result.liftMm ?? null,
    state: result.state,
    value: result.value ?? null,
    unit: result.unit,
    expandedUncertainty: result.expandedUncertainty ?? null,
    pConform: result.pConform ?? null,
    metalLeft: result.metalLeft ?? null,
    text: result.text,
    trace: result.trace,
    band: result.band ?? null,
    typedForPhoto: result.typedForPhoto,
    override: override === null ? null : { state: override.state, reason: override.reason, by: override.by.unwrap().name, at: override.at.toISOString() },
  }
}
