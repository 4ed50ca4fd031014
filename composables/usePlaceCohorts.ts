import { computed, ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { CohortInput, CohortRow } from '#shared/contract/places'
import { useApi } from './useApi'
import { useRead } from './useRead'

/** The school's cohorts as the office keeps them, newest start first; making one and changing one. */
export function usePlaceCohorts() {
  const api = useApi()
  const { data, failure, loading, refresh } = useRead<{ items: CohortRow[] }>('/api/cohorts')
  const cohorts = computed(() => [...(data.value?.items ?? [])].sort((one, other) => other.startsOn.localeCompare(one.startsOn)))
  const refused = ref<Failure | null>(null)

  /** A new cohort, or with a `code` a change of that one. */
  async function keep(input: CohortInput, code: string | null): Promise<Failure | null> {
    const { code: newCode, ...rest } = input
    const answer = code === null
      ? await api.post('/api/cohorts', { code: newCode, ...rest }, crypto.randomUUID())
      : await api.post(`/api/cohorts/${encodeURIComponent(code)}`, rest, crypto.randomUUID())
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) await refresh()
    return refused.value
  }
  return { cohorts, failure, loading, refresh, refused, keep }
}
