import { shallowRef } from 'vue'
import type { MediaView } from '#shared/contract/media'
import type { Page } from '#shared/contract/views'
import { useApi } from './useApi'

/** Pictures and films as an editor needs them: found by title, and those a lesson already shows, by id. */
export function useLessonMedia() {
  const api = useApi()
  const known = shallowRef<Record<string, MediaView>>({})
  const asked = new Set<string>()

  function keep(...media: MediaView[]) {
    known.value = { ...known.value, ...Object.fromEntries(media.map(one => [one.id, one])) }
  }

  /** Fetches what is not known yet; an id that leads nowhere stays unknown, and its block says so. */
  async function need(ids: readonly string[]) {
    const missing = ids.filter(id => !asked.has(id))
    for (const id of missing) asked.add(id)
    const answers = await Promise.all(missing.map(id => api.get<MediaView>(`/api/media/${id}`)))
    keep(...answers.flatMap(answer => answer.ok ? [answer.value] : []))
    // Without a network it may be asked again.
    answers.forEach((answer, at) => !answer.ok && answer.failure.status === 0 && asked.delete(missing[at] ?? ''))
  }

  /** Asks once more for what may have changed. */
  function again(ids: readonly string[]) {
    for (const id of ids) asked.delete(id)
    return need(ids)
  }

  async function find(words: string, kind: 'image' | 'video'): Promise<MediaView[]> {
    const answer = await api.get<Page<MediaView>>(`/api/media?kind=${kind}${words ? `&q=${encodeURIComponent(words)}` : ''}`)
    if (!answer.ok) return []
    keep(...answer.value.items)
    return answer.value.items
  }

  return { known, need, again, find, keep }
}
