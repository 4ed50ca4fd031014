import type { EntityManager } from '@mikro-orm/postgresql'
import { Casting } from '#server/db/entities/Casting'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import { hasRole, type Actor } from '#server/utils/actor'
import type { LimitView } from '#shared/contract/lessons'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { headOfReader } from './head-under-way'
import { limitView } from './limit-view'

/** The casting the course is taught on; who has no head yet sees its limits. */
const usualCasting = 'SL-41'

/** What a lesson's limits are read from, for one reader. */
export interface LimitSource { rubric: Rubric, casting: { code: string, name: string, scope: string } | null }

/** A student's own head's casting and rubric version; for everybody else the course's casting and the newest rubric. Null before there is a rubric. */
export async function limitSource(em: EntityManager, actor: Actor): Promise<LimitSource | null> {
  const head = hasRole(actor, 'student') ? await headOfReader(em, actor.id) : null
  if (head) return { rubric: head.rubric.$.rubric, casting: { code: head.casting.$.code, name: head.casting.$.name, scope: head.casting.$.card.scope } }
  const [newest] = await em.find(RubricVersion, {}, { orderBy: { version: 'desc' }, limit: 1 })
  if (!newest) return null
  const [casting] = await em.find(Casting, { code: usualCasting }, { orderBy: { version: 'desc' }, limit: 1 })
  return { rubric: newest.rubric, casting: casting ? { code: casting.code, name: casting.name, scope: casting.card.scope } : null }
}

/** The named criteria as limits; one the rubric does not have is left out. */
export function limitViews(source: LimitSource | null, criteria: readonly string[]): Record<string, LimitView> {
  const known = source?.rubric.stages.flatMap(stage => stage.criteria) ?? []
  return Object.fromEntries([...new Set(criteria)].flatMap((id) => {
    const criterion = known.find(one => one.id === id)
    return criterion && source ? [[id, limitView(criterion, source.casting)]] : []
  }))
}
