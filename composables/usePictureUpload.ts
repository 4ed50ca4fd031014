import { ref } from 'vue'
import { toFailure, type Failure } from '#shared/contract/failure'
import type { MediaView } from '#shared/contract/media'
import { hashBlob } from '~/stores/outbox/hash-blob'
import { putBlob } from '~/stores/outbox/put-blob'
import { useApi } from './useApi'

/** Over this a file goes up in parts, which is for films; a picture so large is made smaller first. Bytes. */
const largestPicture = 16 * 1024 ** 2

/** Sends one picture for a lesson, straight to storage, and makes it one of the school's. */
export function usePictureUpload() {
  const api = useApi()
  const progress = ref<number | null>(null)
  const failure = ref<Failure | null>(null)

  const refused = (code: string, sentence: string): Failure => ({ code, sentence, status: 422, issues: [], extra: {} })

  async function send(file: File): Promise<MediaView | null> {
    failure.value = null
    if (!['image/jpeg', 'image/png', 'image/webp'].includes(file.type)) {
      failure.value = refused('picture_type', 'A picture is a JPEG, PNG or WebP file.')
      return null
    }
    if (file.size > largestPicture) {
      failure.value = refused('picture_large', 'A picture is at most 16 MB. Make it smaller and send it again.')
      return null
    }
    progress.value = 0
    try {
      const title = file.name.replace(/\.[^.]+$/, '').trim().slice(0, 160) || 'Picture'
      const announced = await api.post<{ id: string, put?: { url: string, headers: Record<string, string> } }>('/api/uploads', { purpose: 'lesson-media', filename: file.name || 'picture', bytes: file.size, contentType: file.type, sha256: await hashBlob(file) }, crypto.randomUUID())
      if (!announced.ok) return fail(announced.failure)
      const { id, put } = announced.value
      if (put) {
        const { status } = await putBlob(put.url, put.headers, file, (share) => { progress.value = share })
        if (status >= 300 && status !== 412) return fail(refused('storage', 'The school’s storage did not take the picture. Send it again.'))
      }
      const completed = await api.post(`/api/uploads/${id}/complete`, {}, crypto.randomUUID())
      if (!completed.ok) return fail(completed.failure)
      const media = await api.post<MediaView>('/api/media', { uploadId: id, title }, crypto.randomUUID())
      return media.ok ? media.value : fail(media.failure)
    }
    catch (thrown) {
      return fail(toFailure(thrown))
    }
    finally {
      progress.value = null
    }
  }

  function fail(why: Failure): null {
    // Nothing of a picture is kept here: the file is where it was.
    failure.value = why.status ? why : { ...why, sentence: 'The school’s server cannot be reached. Send the picture again when it can.' }
    return null
  }

  return { progress, failure, send }
}
