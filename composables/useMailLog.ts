import { ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { MailRow } from '#shared/contract/office'
import { useApi } from './useApi'
import { useTable } from './useTable'

/** Messages of the outbox, of one person or of everybody, and sending one again. */
export function useMailLog(person?: string) {
  const api = useApi()
  const sorts = [{ value: 'newest', label: 'Newest first' }, { value: 'oldest', label: 'Oldest first' }]
  const table = useTable<MailRow, 'state'>(person ? `/api/mails?person=${person}` : '/api/mails', { sorts, filters: { state: '' } })
  const refused = ref<Failure | null>(null)
  const resent = ref('')

  async function resend(mail: MailRow) {
    resent.value = ''
    const answer = await api.post(`/api/mails/${mail.id}/resend`, {}, crypto.randomUUID())
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) {
      resent.value = `"${mail.subject}" goes to ${mail.to} again.`
      await table.refresh()
    }
  }
  const { items, next, failure, loading, busy, more, refresh, search, sort, filters } = table
  return { items, next, failure, loading, busy, more, refresh, search, sort, filters, sorts, resend, resent, refused }
}
