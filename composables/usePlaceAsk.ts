import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { PlaceAskAnswer, PlaceAskInput } from '#shared/contract/places'
import { useApi } from './useApi'

/** Asking for a place in a cohort: what was answered, or why not. */
export function usePlaceAsk(code: string) {
  const api = useApi()
  const answer = ref<PlaceAskAnswer | null>(null)
  const failure = ref<Failure | null>(null)

  async function ask(input: PlaceAskInput): Promise<Failure | null> {
    const given = await api.post<PlaceAskAnswer>(`/api/cohorts/${encodeURIComponent(code)}/asks`, input)
    failure.value = given.ok ? null : given.failure
    if (given.ok) answer.value = given.value
    return failure.value
  }
  function again() {
    answer.value = null
  }
  return { answer, failure, ask, again }
}
