import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { HeadView } from '#shared/contract/views'
import { findHead, type FoundHead } from './find-head'
import { headSummary } from './head-summary'
import { loadRoute, type LoadedRoute } from './route-state'

/** A head with its route: every stage and point as it stands. @throws {Refusal} head_not_found */
export async function viewHead(em: EntityManager, app: App, actor: Actor, id: string): Promise<HeadView> {
  const head = await findHead(em, app, actor, id)
  return toHeadView(em, head, await loadRoute(em, app, head))
}

/** A head and its loaded route as the wire has them: people by name, instants as text. */
export async function toHeadView(em: EntityManager, head: FoundHead, route: LoadedRoute): Promise<HeadView> {
  const lessons = await em.find(Lesson, {}, { orderBy: { number: 'asc' } })
  const ids = [...route.stages.flatMap(stage => stage.points.map(point => point.by)), ...route.stops.map(stop => stop.by.id)].filter((one): one is string => one !== null)
  const people = ids.length === 0 ? [] : await em.find(User, { id: { $in: [...new Set(ids)] } })
  const nameOf = (id: string | null) => people.find(one => one.id === id)?.name ?? null
  return {
    ...headSummary(head, route),
    rubricVersion: head.rubric.$.version,
    stages: route.stages.map(stage => ({
      op: stage.op,
      code: stage.code,
      name: stage.name,
      state: stage.state,
      why: stage.why,
      points: stage.points.map(point => ({
        code: point.code, name: point.name, kind: point.kind, when: point.when, state: point.state, at: iso(point.at), by: nameOf(point.by), conditions: point.conditions, waitUntil: iso(point.waitUntil),
      })),
      lessons: lessons.filter(one => one.ops.includes(stage.op)).map(one => ({ number: one.number, slug: one.slug, title: one.title })),
      submission: stage.submission ? { id: stage.submission.id, part: stage.submission.part, try: stage.submission.try, state: stage.submission.state } : null,
    })),
    stops: route.stops.map(stop => ({ id: stop.id, where: stop.where, reason: stop.reason, by: nameOf(stop.by.id) ?? '', at: stop.at.toISOString() })),
  }
}

function iso(at: number | null): string | null {
  return at === null ? null : new Date(at).toISOString()
}
