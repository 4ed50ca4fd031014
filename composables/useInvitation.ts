import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { InvitationInput } from '#shared/contract/inputs'
import { useApi } from './useApi'

/** Inviting one person: the link goes out by e-mail. */
export function useInvitation(invited: () => void) {
  const api = useApi()
  const failure = ref<Failure | null>(null)
  const sentTo = ref<string | null>(null)
  async function invite(input: InvitationInput) {
    const answer = await api.post('/api/people/invitations', input, crypto.randomUUID())
    failure.value = answer.ok ? null : answer.failure
    sentTo.value = answer.ok ? input.email : null
    if (answer.ok) invited()
    return answer.ok
  }
  return { failure, sentTo, invite }
}
