import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { cohortsTaught, visibleHeads } from '#server/services/heads/visible-heads'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/**
 * A 60 s address that saves a document, for its student and their instructors. It never opens in place.
 *
 * @throws {Refusal} not_found
 */
export async function saveDocument(em: EntityManager, app: App, actor: Actor, id: string): Promise<{ url: string }> {
  const document = await em.findOne(EvidenceDocument, { id, submission: { head: await visibleHeads(em, app, actor) } }, { populate: ['upload', 'submission.head'] })
  const head = document?.submission.$.head.$
  if (!document || !head) throw new Refusal('not_found')
  if (head.student.id !== actor.id && !(await cohortsTaught(em, app, actor)).includes(head.cohort?.id ?? '')) throw new Refusal('not_found')
  const { key, filename, detectedType } = document.upload.$
  return { url: await app.storage.signGet({ key, contentType: detectedType ?? 'application/octet-stream', filename, disposition: 'attachment' }) }
}
