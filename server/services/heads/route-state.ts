import type { EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { HeadStop, PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import { Submission } from '#server/db/entities/Submission'
import { consentStates } from '#server/services/safety/consent-states'
import type { App } from '#server/utils/app'
import { routeState, type RouteStage } from '#shared/domain/rubric/route-state'
import type { FoundHead } from './find-head'
import { standingConditions } from './standing-conditions'

export interface LoadedRoute {
  stages: RouteStage[]
  /** Stops that stand, oldest first. */
  stops: HeadStop[]
  /** "No more cutting" conditions of releases that no newer result has accepted, and what instructors wrote. */
  conditions: string[]
}

type RouteHead = Pick<FoundHead, 'id' | 'state' | 'cohort' | 'student' | 'rubric'>

/** Loads what the state of a head's route follows from, by the school's clock, and works it out. */
export async function loadRoute(em: EntityManager, app: Pick<App, 'clock'>, head: RouteHead): Promise<LoadedRoute> {
  const route = (await loadRoutes(em, app, [head])).get(head.id)
  if (!route) throw new Error(`no route of head ${head.id}`)
  return route
}

/** The same for several heads, by head id, in as many queries as for one. */
export async function loadRoutes(em: EntityManager, app: Pick<App, 'clock'>, heads: readonly RouteHead[]): Promise<Map<string, LoadedRoute>> {
  const ofHeads = { head: { $in: heads.map(head => head.id) } }
  const releases = await em.find(PointRelease, ofHeads, { orderBy: { at: 'asc' } })
  const calls = await em.find(WitnessCall, ofHeads)
  const stops = await em.find(HeadStop, { ...ofHeads, liftedAt: null }, { orderBy: { at: 'asc' } })
  const students = [...new Set(heads.map(head => head.student.id))]
  const clearances = await em.find(Clearance, { person: { $in: students }, withdrawnAt: null })
  const consents = await consentStates(em, students)
  const submissions = await em.find(Submission, ofHeads)
  const now = app.clock.schoolNow().getTime()

  const routes = new Map<string, LoadedRoute>()
  for (const head of heads) {
    const own = <Row extends { head: { id: string } }>(rows: Row[]) => rows.filter(row => row.head.id === head.id)
    const conditions = await standingConditions(em, head.id, own(releases))
    const stages = routeState({
      stages: head.rubric.$.rubric.stages,
      now,
      headState: head.state,
      personal: !head.cohort,
      releases: own(releases).map(one => ({ point: one.point, by: one.by.id, at: one.at.getTime(), conditions: conditions.get(one.id) ?? [], shutAgain: Boolean(one.shutAgainAt) })),
      calls: own(calls).map(one => ({ point: one.point, toldAt: one.toldAt.getTime(), waitUntil: one.waitUntil.getTime(), seenAt: one.seenAt?.getTime() ?? null, seenBy: one.seenBy?.id ?? null })),
      stops: own(stops).map(one => ({ where: one.where, reason: one.reason })),
      clearances: clearances.filter(one => one.person.id === head.student.id).map(one => ({ tool: one.tool, from: one.from.getTime(), until: one.until.getTime() })),
      consent: consents.get(head.student.id) ?? 'none',
      submissions: own(submissions).map(one => ({
        id: one.id, op: one.op, part: one.part, try: one.tryNumber, state: one.state, decision: one.decision ?? null,
        askedAt: one.askedAt?.getTime() ?? null, decidedAt: one.decidedAt?.getTime() ?? null,
      })),
    })
    routes.set(head.id, { stages, stops: own(stops), conditions: [...new Set([...conditions.values()].flat())] })
  }
  return routes
}
