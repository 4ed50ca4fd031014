import { ref, type Ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { SheetView } from '#shared/contract/views'
import { useApi } from './useApi'

/** Answering what a sheet leaves open. Each set of answers is a new reading of the same file; the file never changes. */
export function useSheetReader(submissionId: string, sheet: Ref<SheetView | null>, refresh: () => Promise<unknown>) {
  const api = useApi()
  const busy = ref(false)
  const failure = ref<Failure | null>(null)

  async function call(path: string, body: unknown) {
    busy.value = true
    const answer = await api.post(path, body, crypto.randomUUID())
    failure.value = answer.ok ? null : answer.failure
    if (answer.ok) await refresh()
    busy.value = false
  }

  return {
    busy,
    failure,
    answer: (answers: Record<string, string>) => call(`/api/submissions/${submissionId}/flow-sheets`, { uploadId: sheet.value?.uploadId, answers: { ...sheet.value?.answers, ...answers } }),
    setAside: () => call(`/api/flow-sheets/${sheet.value?.id}/set-aside`, {}),
  }
}
