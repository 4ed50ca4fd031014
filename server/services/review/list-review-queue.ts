import type { EntityManager } from '@mikro-orm/postgresql'
import { z } from 'zod'
import { Cohort } from '#server/db/entities/Cohort'
import { Submission } from '#server/db/entities/Submission'
import { stageNames } from '#server/services/school/stage-names'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { readPageToken, writePageToken } from '#server/utils/page-token'
import type { queueQuery, Page, QueueItem } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'
import { queueStates } from './queue-states'
import { staffLinks } from './staff-links'

const keySchema = z.tuple([z.boolean(), z.string().datetime({ offset: true }), z.string().uuid()])
interface Row { id: string, stop_stands: boolean, asked_at: string, signed: boolean }

/**
 * Submissions that wait for a person, of the cohorts the caller teaches: stops first, then the longest waiting. A stage without a
 * point waits for the next one that needs it and shows here only while a stop criterion stands in it.
 *
 * One walk along a partial index of what waits; it does not grow with what was decided.
 *
 * @throws {Refusal} page_unknown
 */
export async function listReviewQueue(em: EntityManager, app: App, actor: Actor, query: z.output<typeof queueQuery>): Promise<Page<QueueItem>> {
  const now = app.clock.schoolNow()
  const links = await staffLinks(em, actor, now)
  const cohorts = await em.find(Cohort, { id: { $in: [...links.keys()] }, ...(query.cohort === undefined ? {} : { code: query.cohort }) })
  if (cohorts.length === 0) return { items: [], next: null }

  const where = [`h.cohort_id = any(?)`, `(s.point is not null or s.stop_stands)`]
  const values: unknown[] = [`{${cohorts.map(cohort => cohort.id).join(',')}}`]
  if (query.point !== undefined) {
    where.push('s.point = ?')
    values.push(query.point)
  }
  if (query.mine) {
    const pairs = cohorts.flatMap(cohort => [...links.get(cohort.id) ?? []].map(point => [cohort.id, point] as const))
    if (pairs.length === 0) return { items: [], next: null }
    where.push(`(h.cohort_id, s.point) in (${pairs.map(() => '(?::uuid, ?)').join(', ')})`, 'h.student_id <> ?', `not ${signedByMe}`)
    values.push(...pairs.flat(), actor.id, actor.id)
  }
  if (query.after !== undefined) {
    const [stops, askedAt, id] = readPageToken(query.after, keySchema)
    // Descending in the first, ascending in the rest: a row comparison cannot say it.
    where.push('(s.stop_stands < ? or (s.stop_stands = ? and (s.asked_at, s.id) > (?::timestamptz, ?::uuid)))')
    values.push(stops, stops, askedAt, id)
  }
  const rows = await em.getConnection().execute<Row[]>(
    `select s.id, s.stop_stands, to_char(s.asked_at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"') as asked_at, ${signedByMe} as signed
     from submission s join practice_head h on h.id = s.head_id
     where s.state in ('asked', 'scored') and ${where.join(' and ')}
     order by s.stop_stands desc, s.asked_at, s.id limit ?`, [actor.id, ...values, query.limit + 1])

  const page = rows.slice(0, query.limit)
  const last = page[page.length - 1]
  return {
    items: await toItems(em, actor, page, links, now),
    next: rows.length > query.limit && last ? writePageToken([last.stop_stands, last.asked_at, last.id]) : null,
  }
}

/** Whether the caller has released this very version already and it waits for another person. */
const signedByMe = `exists (select 1 from review r join point_release pr on pr.review_id = r.id where r.submission_id = s.id and r.seen_version = s.version and pr.by_id = ? and pr.shut_again_at is null)`

async function toItems(em: EntityManager, actor: Actor, page: readonly Row[], links: ReadonlyMap<string, Set<string>>, now: Date): Promise<QueueItem[]> {
  const submissions = await em.find(Submission, { id: { $in: page.map(row => row.id) } }, { populate: ['head', 'head.student', 'head.cohort'], strategy: 'select-in' })
  const stageName = await stageNames(em, submissions.map(one => one.head.$.rubric.id))
  const states = await queueStates(em, page.map(row => row.id))
  return page.flatMap((row): QueueItem[] => {
    const submission = submissions.find(one => one.id === row.id)
    if (!submission?.askedAt) return []
    const head = submission.head.$
    const cohort = head.cohort?.$ ?? null
    return [{
      id: submission.id,
      head: { id: head.id, number: head.number },
      student: head.student.$.name,
      cohort: cohort?.name ?? null,
      op: submission.op,
      stageName: stageName(head.rubric.id, submission.op),
      part: submission.part,
      try: submission.tryNumber,
      point: submission.point ? { code: submission.point, name: pointName(submission.point) } : null,
      state: submission.state,
      askedAt: submission.askedAt.toISOString(),
      waitingMinutes: Math.max(0, Math.floor((now.getTime() - submission.askedAt.getTime()) / 60_000)),
      stopStands: submission.stopStands,
      states: states.get(submission.id) ?? { 'accept': 0, 'borderline': 0, 'reject': 0, 'not-assessed': 0, 'does-not-apply': 0 },
      youMaySign: Boolean(submission.point) && !row.signed && head.student.id !== actor.id && (links.get(cohort?.id ?? '')?.has(submission.point ?? '') ?? false),
    }]
  })
}
