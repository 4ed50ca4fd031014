import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { SubmissionView } from '#shared/contract/views'
import { useApi } from './useApi'

/** Opens the draft of the part that is due, and goes to its proof tray. */
export function useStartProof() {
  const api = useApi()
  const busy = ref(false)
  const failure = ref<Failure | null>(null)
  let key = crypto.randomUUID()

  async function start(headId: string, op: number) {
    busy.value = true
    const answer = await api.post<SubmissionView>(`/api/heads/${headId}/stages/${op}/submissions`, {}, key)
    busy.value = false
    failure.value = answer.ok ? null : answer.failure
    // The same press again says the same; another stage is another call.
    if (answer.ok || answer.failure.status) key = crypto.randomUUID()
    if (answer.ok) await navigateTo(`/proof/${answer.value.id}`)
  }
  return { busy, failure, start }
}
