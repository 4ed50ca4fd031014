import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Upload } from '#server/db/entities/Upload'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'

/** One's own upload. Another person's is not found. @throws {Refusal} upload_not_found */
export async function findUpload(em: EntityManager, actor: Actor, id: string, { lock = false } = {}): Promise<Upload> {
  const upload = await em.findOne(Upload, { id, owner: actor.id }, lock ? { lockMode: LockMode.PESSIMISTIC_WRITE } : {})
  if (!upload) throw new Refusal('upload_not_found')
  return upload
}
