import { getCurrentInstance, onMounted, onScopeDispose, shallowRef, type ShallowRef } from 'vue'
import { toFailure } from '#shared/contract/failure'
import type { MediaSending, MediaView } from '#shared/contract/media'
import { forgetBegun, isOf, keepBegun, readBegun, type BegunUpload } from './film/begun-uploads'
import { filmFacts } from './film/film-facts'
import { hashFile } from './film/hash-file'
import { sendFilm, type Announced } from './film/send-film'

/** Between two looks whether the school has read a film through, milliseconds. */
const lookEvery = 2000
const nothing: MediaSending = { phase: 'none', filename: '', share: 0, sentence: null, unfinished: [] }

type Call = <T>(path: string, options?: Record<string, unknown>) => Promise<T>

/**
 * Sends a picture or film for lessons: hashed as it is read, in parts where it is large, each tried again by itself. It can be paused.
 * After a reload the same file, chosen again, goes on where it was. `send` answers the picture or film once the school has it, a film in
 * parts while it is still being checked; null when it was paused or refused.
 */
export function useFilmUpload() {
  const sending: ShallowRef<MediaSending> = shallowRef(nothing)
  let file: File | null = null
  let title = ''
  let stop = new AbortController()
  const call = $fetch as unknown as Call
  const say = (change: Partial<MediaSending>) => {
    sending.value = { ...sending.value, ...change }
  }
  const list = () => readBegun().map(one => one.name)
  // Not before: the server cannot know what this device remembers, and both must draw the same first.
  if (getCurrentInstance()) onMounted(() => say({ unfinished: list() }))
  onScopeDispose(() => stop.abort())

  async function announce(given: File): Promise<{ begun: BegunUpload, announced: Announced }> {
    const known = readBegun().find(one => isOf(one, given))
    if (known) {
      const announced = await call<Announced>(`/api/uploads/${known.uploadId}`, { retry: false }).catch((thrown: unknown) => {
        // Gone, or another person's on a shared machine: begun anew below. Anything else is the network's.
        if (toFailure(thrown).status === 404) return null
        throw thrown
      })
      if (announced && (announced.state === 'open' || announced.state === 'received')) return { begun: known, announced }
      forgetBegun(known.uploadId)
    }
    say({ phase: 'reading', share: 0 })
    const sha256 = await hashFile(given, share => say({ share }), stop.signal)
    const announced = await post<Announced>('/api/uploads', { purpose: 'lesson-media', filename: given.name, bytes: given.size, contentType: given.type || 'application/octet-stream', sha256 }, crypto.randomUUID())
    const begun = { name: given.name, bytes: given.size, changedAt: given.lastModified, sha256, uploadId: announced.id, mediaKey: crypto.randomUUID(), begunAt: Date.now() }
    keepBegun(begun)
    return { begun, announced }
  }

  const post = <T>(path: string, body: unknown, key: string) => call<T>(path, { method: 'POST', body, headers: { 'idempotency-key': key }, retry: false })

  async function send(given: File, words: string): Promise<MediaView | null> {
    stop.abort()
    stop = new AbortController()
    const { signal } = stop
    file = given
    title = words
    sending.value = { ...nothing, phase: 'reading', filename: given.name }
    try {
      const facts = filmFacts(given)
      const { begun, announced } = await announce(given)
      if (announced.state === 'open') {
        say({ phase: 'sending', share: 0 })
        await sendFilm(given, announced, {
          look: () => call<Announced>(`/api/uploads/${begun.uploadId}`, { retry: false }),
          onProgress: share => say({ share }),
          wait: milliseconds => new Promise(done => setTimeout(done, milliseconds)),
          signal,
        })
        say({ phase: 'finishing', share: 1 })
        await post(`/api/uploads/${begun.uploadId}/complete`, {}, crypto.randomUUID())
      }
      say({ phase: 'finishing', share: 1 })
      const media = await post<MediaView>('/api/media', { uploadId: begun.uploadId, title: words, ...await facts }, begun.mediaKey)
      forgetBegun(begun.uploadId)
      say({ phase: media.state === 'ready' ? 'done' : 'checking', unfinished: list() })
      if (media.state === 'being checked') void follow(media.id, signal)
      return media
    }
    catch (thrown) {
      if (signal.aborted) {
        if (stop.signal === signal) say({ phase: 'paused', sentence: null })
        return null
      }
      const failure = toFailure(thrown)
      // Whatever the network or a busy server did can be gone on from; a no of the school's cannot.
      const passing = failure.status === 0 || failure.status >= 500 || failure.status === 429 || failure.code === 'upload_incomplete'
      if (!passing) for (const one of readBegun().filter(begun => isOf(begun, given))) forgetBegun(one.uploadId)
      say({ phase: passing ? 'paused' : 'refused', sentence: failure.sentence, unfinished: list() })
      return null
    }
  }

  /** Looks until the film was read through; says why when it was refused. */
  async function follow(id: string, signal: AbortSignal): Promise<void> {
    while (!signal.aborted) {
      await new Promise(done => setTimeout(done, lookEvery))
      const media = await call<MediaView>(`/api/media/${id}`, { retry: false }).catch(() => null)
      if (signal.aborted || !media || media.state === 'being checked') continue
      say(media.state === 'ready' ? { phase: 'done' } : { phase: 'refused', sentence: media.problem })
      return
    }
  }

  function pause() {
    stop.abort()
  }
  /** Goes on with the file that was paused. */
  function resume(): Promise<MediaView | null> {
    return file ? send(file, title) : Promise.resolve(null)
  }
  function clear() {
    stop.abort()
    // Whatever was under way has another's signal now, and says nothing more.
    stop = new AbortController()
    file = null
    sending.value = { ...nothing, unfinished: list() }
  }

  return { sending, send, pause, resume, clear }
}
