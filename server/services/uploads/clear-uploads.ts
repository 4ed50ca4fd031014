import type { App } from '#server/utils/app'
import { Upload } from '#server/db/entities/Upload'

const day = 24 * 3600_000

/**
 * Removes uploads nobody finished within a day and files nobody used within thirty, the object first: a kill between the two leaves a
 * row that the next run clears.
 */
export async function clearUploads(app: App): Promise<number> {
  const em = app.orm.em.fork()
  const now = Date.now()
  const stale = await em.find(Upload, { $or: [
    { state: 'open', createdAt: { $lt: new Date(now - day) } },
    { state: { $in: ['received', 'refused'] }, createdAt: { $lt: new Date(now - 30 * day) } },
  ] }, { limit: 500, orderBy: { createdAt: 'asc' } })
  for (const upload of stale) {
    if (upload.multipartId) await app.storage.abortParts({ key: upload.key, multipartId: upload.multipartId })
    await app.storage.remove(upload.key)
    await em.nativeDelete(Upload, { id: upload.id, state: upload.state })
  }
  return stale.length
}
