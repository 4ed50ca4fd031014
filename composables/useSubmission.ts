import { computed, onBeforeUnmount, onMounted, ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { SubmissionView } from '#shared/contract/views'
import { useApi } from './useApi'
import { useFollow } from './useFollow'
import { useOutboxSession } from './useOutboxSession'
import { useRead } from './useRead'

/** One submission on screen: what the server has, what is still on this device, and asking for its release. */
export function useSubmission(id: string) {
  const { data: submission, failure, loading, refresh } = useRead<SubmissionView>(`/api/submissions/${id}`)
  const outbox = useOutboxSession()
  const here = outbox.forSubmission(id)
  const api = useApi()
  const asking = ref(false)
  const askFailure = ref<Failure | null>(null)
  const askKey = ref<string | null>(null)

  const followed = computed(() => (submission.value?.state === 'asked' || submission.value?.state === 'scored' ? id : null))
  const { by: following } = useFollow(followed, computed(() => followed.value !== null), refresh)

  onMounted(() => {
    const off = outbox.onFiled(item => item.submissionId === id && refresh())
    onBeforeUnmount(off)
  })

  const stillHere = computed(() => here.value.length)
  const stillWanted = computed(() => (submission.value?.wanted ?? []).filter(want => want.have < want.count))

  async function ask(note: string) {
    asking.value = true
    askKey.value ??= crypto.randomUUID()
    const answer = await api.post(`/api/submissions/${id}/ask`, note ? { note } : {}, askKey.value)
    askFailure.value = answer.ok ? null : answer.failure
    if (answer.ok || answer.failure.status) askKey.value = null
    asking.value = false
    await refresh()
  }

  const saying = ref(false)
  async function sayAcidCleaned(acidCleaned: boolean) {
    saying.value = true
    await api.post(`/api/heads/${submission.value?.head.id}/acid-cleaned`, { acidCleaned }, crypto.randomUUID())
    await refresh()
    saying.value = false
  }

  return { saying, sayAcidCleaned, submission, failure, loading, refresh, outbox, here, stillHere, stillWanted, ask, asking, askFailure, following }
}
