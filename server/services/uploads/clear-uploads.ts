import { LockMode } from '@mikro-orm/postgresql'
import { Upload } from '#server/db/entities/Upload'
import type { App } from '#server/utils/app'

const day = 24 * 3600_000

/**
 * Removes uploads nobody finished within a day and files nobody used within thirty. Each is locked and looked at once more, so that one
 * that is used at this moment stays; the object goes first, and a kill between the two leaves a row that the next run clears.
 */
export async function clearUploads(app: App): Promise<number> {
  const em = app.orm.em.fork()
  const now = Date.now()
  const stale = { $or: [
    { state: 'open' as const, createdAt: { $lt: new Date(now - day) } },
    { state: { $in: ['received', 'refused'] as const }, createdAt: { $lt: new Date(now - 30 * day) } },
  ] }
  const found = await em.find(Upload, stale, { fields: ['id'], limit: 500, orderBy: { createdAt: 'asc' } })
  let cleared = 0
  for (const { id } of found) {
    await app.orm.em.fork().transactional(async (tx) => {
      const upload = await tx.findOne(Upload, { id, ...stale }, { lockMode: LockMode.PESSIMISTIC_PARTIAL_WRITE })
      if (!upload) return
      if (upload.multipartId) await app.storage.abortParts({ key: upload.key, multipartId: upload.multipartId })
      await app.storage.remove(upload.key)
      tx.remove(upload)
      cleared += 1
    })
  }
  return cleared
}
