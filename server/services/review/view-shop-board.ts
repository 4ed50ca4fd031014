import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { HeadStop } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { stageNames } from '#server/services/school/stage-names'
import type { Actor } from '#server/utils/actor'
import { hasRole } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { ShopBoardView } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'
import { staffLinks } from './staff-links'

const mostHeads = 200

/** Heads at work in the cohorts the caller teaches (all, for the safety officer): who is held, for how long, and stops. Worst first. */
export async function viewShopBoard(em: EntityManager, app: App, actor: Actor): Promise<ShopBoardView> {
  const now = app.clock.schoolNow()
  const cohorts: FilterQuery<PracticeHead> = hasRole(actor, 'safety') ? { cohort: { $ne: null } } : { cohort: { $in: [...(await staffLinks(em, actor, now)).keys()] } }
  const heads = await em.find(PracticeHead, { $and: [cohorts, { state: { $in: ['received', 'working'] } }] }, { populate: ['student', 'cohort'], strategy: 'select-in', orderBy: { receivedAt: 'desc', id: 'asc' }, limit: mostHeads })
  const ids = heads.map(head => head.id)
  const stops = await em.find(HeadStop, { head: { $in: ids }, liftedAt: null }, { populate: ['by'], orderBy: { at: 'asc' } })
  const waiting = await em.find(Submission, { head: { $in: ids }, state: { $in: ['asked', 'scored'] }, $or: [{ point: { $ne: null } }, { stopStands: true }] }, { orderBy: { askedAt: 'asc' } })

  const stageName = await stageNames(em, heads.map(head => head.rubric.id))
  const items = heads.flatMap((head) => {
    const cohort = head.cohort?.$
    if (!cohort) return []
    return [{
      head: { id: head.id, number: head.number },
      student: { id: head.student.id, name: head.student.$.name },
      cohort: { code: cohort.code, name: cohort.name },
      stops: stops.filter(stop => stop.head.id === head.id).map(stop => ({ id: stop.id, where: stop.where, reason: stop.reason, by: stop.by.$.name, at: stop.at.toISOString() })),
      waiting: waiting.filter(one => one.head.id === head.id).map(one => ({
        id: one.id,
        op: one.op,
        stageName: stageName(head.rubric.id, one.op),
        point: one.point ? { code: one.point, name: pointName(one.point) } : null,
        state: one.state,
        since: (one.askedAt ?? one.createdAt).toISOString(),
        minutes: Math.max(0, Math.floor((now.getTime() - (one.askedAt ?? one.createdAt).getTime()) / 60_000)),
        stopStands: one.stopStands,
      })),
    }]
  })
  const rank = (item: (typeof items)[number]): number => (item.stops.length > 0 ? 2 : 0) + (item.waiting.some(one => one.stopStands) ? 1 : 0)
  const longest = (item: (typeof items)[number]): number => Math.max(-1, ...item.waiting.map(one => one.minutes))
  return { items: items.sort((one, other) => rank(other) - rank(one) || longest(other) - longest(one) || one.head.number.localeCompare(other.head.number)) }
}
