import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { PersonDetail } from '#shared/contract/office'
import { useApi } from './useApi'
import { useRead } from './useRead'

/** One account and what the office may do with it. `said` is what was done last, in words. */
export function usePerson(id: string) {
  const api = useApi()
  const { data: person, failure, loading, refresh } = useRead<PersonDetail>(`/api/people/${id}`)
  const refused = ref<Failure | null>(null)
  const said = ref('')
  const busy = ref(false)

  async function act(what: string, body: Record<string, unknown>, words: string): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    said.value = ''
    const answer = await api.post(`/api/people/${id}/${what}`, body, crypto.randomUUID())
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) {
      await refresh()
      said.value = words
    }
    busy.value = false
    return answer.ok
  }

  return {
    person, failure, loading, refresh, refused, said, busy,
    changeRoles: (roles: string[]) => act('roles', { roles }, 'The roles are changed; they count from now.'),
    rename: (name: string) => act('name', { name }, 'The name is corrected.'),
    endSessions: () => act('end-sessions', {}, 'Every sign-in of this person is ended.'),
    inviteAgain: () => act('invite-again', {}, 'A new link is on its way.'),
  }
}
