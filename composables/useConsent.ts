import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { ConsentView } from '#shared/contract/safety'
import { useApi } from './useApi'
import { useRead } from './useRead'

/** What the page sends to sign; the server reads it by `consentInput`. */
export interface ConsentSigning { ticks: string[], signedAs: string, under18: boolean, guardian: string, firstAid: string, bootSize: string }

/** One's safety form: signing it, and what may be changed any day. `said` is what was done last, in words. */
export function useConsent() {
  const api = useApi()
  const { data: form, failure, loading, refresh } = useRead<ConsentView>('/api/consent')
  const busy = ref<'sign' | 'note' | string | null>(null)
  const refused = ref<Failure | null>(null)
  const said = ref('')
  // Kept until the server has said it has it: a second press after a lost answer signs nothing twice.
  let key = crypto.randomUUID()

  async function send(what: string, path: string, body: unknown, words: string): Promise<boolean> {
    if (busy.value) return false
    busy.value = what
    said.value = ''
    const answer = await api.post<ConsentView>(path, body, key)
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) {
      form.value = answer.value
      said.value = words
    }
    // A refusal is an answer too; another text or other words are another call.
    if (answer.ok || answer.failure.status) key = crypto.randomUUID()
    // Whoever signed in another tab, or read an older text, sees how it stands now.
    if (!answer.ok && ['consent_stale', 'consent_signed'].includes(answer.failure.code)) await refresh()
    busy.value = null
    return answer.ok
  }

  return {
    form, failure, loading, refresh, busy, refused, said,
    sign: (given: ConsentSigning) => send('sign', '/api/consent', { version: form.value?.version, ...given }, 'Signed. Thank you.'),
    choose: (code: string, allowed: boolean) => send(code, '/api/consent/choices', { code, allowed }, allowed ? 'Allowed from now on.' : 'Taken back, from now on.'),
    changeNote: (note: { firstAid: string, bootSize: string }) => send('note', '/api/consent/note', note, 'Kept.'),
  }
}
