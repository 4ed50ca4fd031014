import { computed, onMounted, ref, shallowRef, watch, type Ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { LessonView, NoteView } from '#shared/contract/lessons'
import { useApi } from './useApi'
import { useMe } from './useMe'

interface Waiting { key: string, anchor: string | null, text: string }

/**
 * One's own notes in a lesson, by heading. A note goes to the server when it is saved; until the server has it, it is on this device
 * (`waiting`), and is sent again when the page is next open with a network.
 */
export function useNotes(slug: string, lesson: Ref<LessonView | null | undefined>) {
  const api = useApi()
  const { me } = useMe()
  const added = shallowRef<NoteView[]>([])
  const removed = ref<string[]>([])
  const changed = shallowRef<Record<string, NoteView>>({})
  const waiting = ref<Waiting[]>([])
  const failure = ref<Failure | null>(null)
  const busy = ref(false)
  const notes = computed(() => [...(lesson.value?.notes ?? []), ...added.value].filter(note => !removed.value.includes(note.id)).map(note => changed.value[note.id] ?? note))
  const shelf = () => `witness-mark:${me.value?.id ?? 'nobody'}:notes:${slug}`

  function keep() {
    if (waiting.value.length) localStorage.setItem(shelf(), JSON.stringify(waiting.value))
    else localStorage.removeItem(shelf())
  }

  async function add(anchor: string | null, text: string) {
    waiting.value = [...waiting.value, { key: crypto.randomUUID(), anchor, text }]
    keep()
    return sendWaiting()
  }

  /** Sends what waits, oldest first; answers whether all of it is with the server. */
  async function sendWaiting(): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    failure.value = null
    while (waiting.value[0]) {
      const { key, anchor, text } = waiting.value[0]
      const answer = await api.post<NoteView>(`/api/lessons/${slug}/notes`, { anchor, text }, key)
      if (!answer.ok) {
        failure.value = answer.failure
        break
      }
      added.value = [...added.value, answer.value]
      waiting.value = waiting.value.slice(1)
      keep()
    }
    busy.value = false
    return waiting.value.length === 0
  }

  function dropWaiting(key: string) {
    waiting.value = waiting.value.filter(one => one.key !== key)
    failure.value = null
    keep()
  }

  async function remove(id: string) {
    const answer = await api.remove(`/api/notes/${id}`)
    failure.value = answer.ok ? null : answer.failure
    if (answer.ok) removed.value = [...removed.value, id]
  }

  async function change(id: string, text: string): Promise<boolean> {
    const note = notes.value.find(one => one.id === id)
    const answer = await api.post<NoteView>(`/api/notes/${id}`, { anchor: note?.anchor ?? null, text }, crypto.randomUUID())
    failure.value = answer.ok ? null : answer.failure
    if (answer.ok) changed.value = { ...changed.value, [id]: answer.value }
    return answer.ok
  }

  onMounted(() => watch(() => me.value?.id, (id) => {
    const kept = id ? localStorage.getItem(shelf()) : null
    if (!kept) return
    waiting.value = readKept(kept)
    void sendWaiting()
  }, { immediate: true }))

  return { notes, waiting, failure, busy, add, change, remove, sendWaiting, dropWaiting }
}

/** What stands in the browser's storage may have been written by anything; what cannot be read is no note. */
function readKept(text: string): Waiting[] {
  try {
    const kept: unknown = JSON.parse(text)
    return Array.isArray(kept) ? kept.filter((one): one is Waiting => typeof one?.key === 'string' && typeof one?.text === 'string') : []
  }
  catch {
    return []
  }
}
