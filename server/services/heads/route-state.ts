import type { EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { HeadStop, PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import { Submission } from '#server/db/entities/Submission'
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

/** Loads what the state of a head's route follows from, by the school's clock, and works it out. Never in parallel on one entity manager. */
export async function loadRoute(em: EntityManager, app: Pick<App, 'clock'>, head: Pick<FoundHead, 'id' | 'state' | 'cohort' | 'student' | 'rubric'>): Promise<LoadedRoute> {
  const releases = await em.find(PointRelease, { head: head.id }, { orderBy: { at: 'asc' } })
  const calls = await em.find(WitnessCall, { head: head.id })
  const stops = await em.find(HeadStop, { head: head.id, liftedAt: null }, { orderBy: { at: 'asc' } })
  const clearances = await em.find(Clearance, { person: head.student.id, withdrawnAt: null })
  const submissions = await em.find(Submission, { head: head.id })
  const conditions = await standingConditions(em, head.id, releases)
  const stages = routeState({
    stages: head.rubric.$.rubric.stages,
    now: app.clock.schoolNow().getTime(),
    headState: head.state,
    personal: head.cohort === null || head.cohort === undefined,
    releases: releases.map(one => ({ point: one.point, by: one.by.id, at: one.at.getTime(), conditions: conditions.get(one.id) ?? [], shutAgain: one.shutAgainAt !== null && one.shutAgainAt !== undefined })),
    calls: calls.map(one => ({ point: one.point, toldAt: one.toldAt.getTime(), waitUntil: one.waitUntil.getTime(), seenAt: one.seenAt?.getTime() ?? null, seenBy: one.seenBy?.id ?? null })),
    stops: stops.map(one => ({ where: one.where, reason: one.reason })),
    clearances: clearances.map(one => ({ tool: one.tool, from: one.from.getTime(), until: one.until.getTime() })),
    submissions: submissions.map(one => ({
      id: one.id, op: one.op, part: one.part, try: one.tryNumber, state: one.state, decision: one.decision ?? null,
      askedAt: one.askedAt?.getTime() ?? null, decidedAt: one.decidedAt?.getTime() ?? null,
    })),
  })
  return { stages, stops, conditions: [...new Set([...conditions.values()].flat())] }
}
