import type { EntityManager } from '@mikro-orm/postgresql'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { HeadSummary, Page } from '#shared/contract/views'
import type { FoundHead } from './find-head'
import { headSummary } from './head-summary'
import { loadRoutes } from './route-state'
import { visibleHeads } from './visible-heads'

/**
 * Heads this person may see, by number. `next` is the number of the last of the page.
 *
 * @throws {Refusal} page_unknown when `after` cannot be a head's number
 */
export async function listHeads(em: EntityManager, app: App, actor: Actor, { after, limit }: { after?: string, limit: number }): Promise<Page<HeadSummary>> {
  if (after !== undefined && !/^[\w .-]{1,20}$/.test(after)) throw new Refusal('page_unknown')
  const where = { $and: [await visibleHeads(em, app, actor), after === undefined ? {} : { number: { $gt: after } }] }
  const found = await em.find(PracticeHead, where, { populate: ['student', 'cohort', 'casting', 'rubric'], orderBy: { number: 'asc' }, limit: limit + 1 })
  const heads = found.slice(0, limit)
  return { items: await headSummaries(em, app, heads as FoundHead[]), next: found.length > limit ? heads[heads.length - 1]?.number ?? null : null }
}

/** Heads in a line each, in the order given. */
export async function headSummaries(em: EntityManager, app: App, heads: readonly FoundHead[]): Promise<HeadSummary[]> {
  if (heads.length === 0) return []
  const routes = await loadRoutes(em, app, heads)
  return heads.flatMap((head) => {
    const route = routes.get(head.id)
    return route ? [headSummary(head, route)] : []
  })
}
