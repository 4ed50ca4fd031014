import { computed, ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { LedgerRow, MoneyBookView, OpenMoneyView } from '#shared/contract/money'
import type { CohortRow } from '#shared/contract/places'
import { useApi } from './useApi'
import { useRead } from './useRead'
import { useTable } from './useTable'

/** The money book: the ledger as asked for with its sums, what is open, and what can be done about a refund that did not go. */
export function useMoneyBook() {
  const api = useApi()
  const ledger = useTable<LedgerRow, 'cohort' | 'kind' | 'from' | 'until'>('/api/ledger', {
    sorts: [{ value: 'newest', label: 'Newest first' }, { value: 'oldest', label: 'Oldest first' }, { value: 'amount', label: 'Largest first' }],
    filters: { cohort: '', kind: '', from: '', until: '' },
  })
  /** Come with every page, of all lines that were found. */
  const sums = computed(() => (ledger.first.value as MoneyBookView | null | undefined)?.sums ?? null)
  const { data: open, failure: openFailure, loading: openLoading, refresh: refreshOpen } = useRead<OpenMoneyView>('/api/money/open')
  const { data: cohorts } = useRead<{ items: CohortRow[] }>('/api/cohorts')

  const busy = ref<string | null>(null)
  const refused = ref<Failure | null>(null)
  let key: string | null = null

  /** True when it is done; else `refused` says why. A press keeps its key until the server has answered. */
  async function act(refundId: string, path: string, body: Record<string, unknown>): Promise<boolean> {
    if (busy.value) return false
    busy.value = refundId
    key ??= crypto.randomUUID()
    const answer = await api.post(path, body, key)
    if (answer.ok || answer.failure.status > 0) key = null
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok || answer.failure.status === 409) await Promise.all([refreshOpen(), ledger.refresh()])
    busy.value = null
    return answer.ok
  }
  function startAgain() {
    refused.value = null
    key = null
  }

  return { ledger, sums, open, openFailure, openLoading, refreshOpen, cohorts, busy, refused, act, startAgain }
}
