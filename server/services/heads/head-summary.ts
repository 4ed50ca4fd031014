import type { HeadStop } from '#server/db/entities/PointRelease'
import type { HeadSummary } from '#shared/contract/views'
import type { RouteStage } from '#shared/domain/rubric/route-state'
import type { FoundHead } from './find-head'

/** A head in a line. `held` and `stopped` are derived: something of it was asked and waits, or a stop stands. */
export function headSummary(head: FoundHead, route: { stages: readonly RouteStage[], stops: readonly HeadStop[] }): HeadSummary {
  const now = stageNow(route.stages)
  const alive = head.state === 'received' || head.state === 'working'
  const state = alive && route.stops.length > 0 ? 'stopped' : alive && route.stages.some(stage => stage.state === 'held') ? 'held' : head.state
  return {
    id: head.id,
    number: head.number,
    student: { id: head.student.id, name: head.student.$.name },
    cohort: head.cohort ? { code: head.cohort.$.code, name: head.cohort.$.name } : null,
    casting: { code: head.casting.$.code, name: head.casting.$.name, cylinders: head.casting.$.card.cylinders },
    state,
    stageNow: now ? { op: now.op, name: now.name } : null,
  }
}

/** The stage a student is at: the first held or open one; where none is, the first that is not done. */
export function stageNow(stages: readonly RouteStage[]): RouteStage | null {
  return stages.find(stage => stage.state === 'held' || stage.state === 'open') ?? stages.find(stage => stage.state !== 'done') ?? null
}
