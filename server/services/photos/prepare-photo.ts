import { AdapterRefusal } from '#server/adapters/adapter-refusal'
import { Photo } from '#server/db/entities/Photo'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { findForJob } from '#server/services/submissions/find-for-job'
import type { App } from '#server/utils/app'
import { signal } from '#server/utils/signals'

/**
 * Makes the two pictures people see: upright, without a word of where or with what it was taken. The original stays as it came.
 * A picture that cannot be decoded becomes "cannot use", with the line that says what to do. Twice is no harm: the keys are the same.
 */
export async function preparePhoto(app: App, photoId: string): Promise<void> {
  const em = app.orm.em.fork()
  const photo = await em.findOne(Photo, { id: photoId }, { populate: ['upload'] })
  if (!photo || photo.previewKey || photo.state === 'cannot-use') return
  const made = await render(app, photo.upload.$.key)
  await em.transactional(async (tx) => {
    const submission = await findForJob(tx, photo.submission.id)
    const row = await tx.findOneOrFail(Photo, { id: photoId }, { refresh: true })
    if ('problem' in made) {
      row.state = 'cannot-use'
      row.problem = made.problem
    }
    else {
      row.thumbKey = `${photo.upload.$.key}.thumb.webp`
      row.previewKey = `${photo.upload.$.key}.preview.webp`
    }
    await tx.flush()
    // Only a picture that fell out of the evidence changes what the submission rests on.
    if ('problem' in made) await afterEvidence(tx, app, submission)
    else await signal(tx, { kind: 'submission', id: submission.id })
  })
}

async function render(app: App, key: string): Promise<{ problem: string } | { done: true }> {
  try {
    const { thumbnail, preview } = await app.imaging.renditions(await app.storage.read(key))
    await app.storage.put({ key: `${key}.thumb.webp`, body: thumbnail.body, contentType: thumbnail.contentType })
    await app.storage.put({ key: `${key}.preview.webp`, body: preview.body, contentType: preview.contentType })
    return { done: true }
  }
  catch (thrown) {
    if (thrown instanceof AdapterRefusal && thrown.code !== 'upload_incomplete') return { problem: thrown.sentence }
    throw thrown
  }
}
