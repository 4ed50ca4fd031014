import { shallowRef } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { MediaView, TrackInput } from '#shared/contract/media'
import { useApi } from './useApi'

/** Saves captions and chapters of a film; `failure` names every mistake by its line. */
export function useFilmTracks() {
  const api = useApi()
  const busy = shallowRef(false)
  const failure = shallowRef<Failure | null>(null)

  /** The film with them; null when they were refused. */
  async function save(mediaId: string, track: TrackInput): Promise<MediaView | null> {
    busy.value = true
    const answer = await api.post<MediaView>(`/api/media/${mediaId}/tracks`, track, crypto.randomUUID())
    busy.value = false
    failure.value = answer.ok ? null : answer.failure
    return answer.ok ? answer.value : null
  }

  return { busy, failure, save }
}
