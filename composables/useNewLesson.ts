import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import { useApi } from './useApi'

/** Starting a lesson: a title and a module, then straight to writing it. Nobody reads it before it is published. */
export function useNewLesson() {
  const api = useApi()
  const asked = ref(false)
  const sending = ref(false)
  const failure = ref<Failure | null>(null)
  let key = crypto.randomUUID()

  async function make(input: { title: string, module: number, ops: number[] }) {
    sending.value = true
    const answer = await api.post<{ slug: string }>('/api/lessons', input, key)
    sending.value = false
    failure.value = answer.ok ? null : answer.failure
    if (answer.ok || answer.failure.status) key = crypto.randomUUID()
    if (answer.ok) await navigateTo(`/lessons/${answer.value.slug}/edit`)
  }
  return { asked, sending, failure, make }
}
