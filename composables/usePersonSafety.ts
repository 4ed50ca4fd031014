import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { PersonSafetyView } from '#shared/contract/safety'
import { toolName } from '#shared/contract/safety'
import { useApi } from './useApi'
import { useRead } from './useRead'

/** One person as the safety officer sees them: giving and withdrawing clearances. `said` is what was done last, in words. */
export function usePersonSafety(id: string) {
  const api = useApi()
  const { data: person, failure, loading, refresh } = useRead<PersonSafetyView>(`/api/clearances/people/${id}`)
  const refused = ref<Failure | null>(null)
  const said = ref('')
  const busy = ref(false)

  async function act(path: string, body: Record<string, unknown>, words: string): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    said.value = ''
    const answer = await api.post(path, body, crypto.randomUUID())
    refused.value = answer.ok ? null : answer.failure
    await refresh()
    if (answer.ok) said.value = words
    busy.value = false
    return answer.ok
  }

  return {
    person, failure, loading, refresh, refused, said, busy,
    give: (tool: string, until: string) => act('/api/clearances', { person: id, tool, until }, `Cleared for the ${toolName(tool)}.`),
    withdraw: (clearance: { id: string, tool: string }) => act(`/api/clearances/${clearance.id}/withdraw`, {}, `The clearance for the ${toolName(clearance.tool)} is withdrawn; it counts from now.`),
  }
}
