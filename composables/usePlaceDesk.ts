import { ref, shallowRef } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { RefundQuote } from '#shared/contract/money'
import type { CancelCause, PlaceView } from '#shared/contract/places'
import { useApi } from './useApi'
import { useRead } from './useRead'

/**
 * One place on the office's desk: how it stands, what the rule would give back, and everything that can be done with it.
 *
 * What was pressed carries one key until the server has answered, so that a second press after a cut line does nothing twice.
 */
export function usePlaceDesk(id: string) {
  const path = `/api/places/${encodeURIComponent(id)}`
  const api = useApi()
  const { data: place, failure: unread, loading, refresh } = useRead<PlaceView>(path)
  const busy = ref(false)
  const refused = ref<Failure | null>(null)
  let key: string | null = null

  /** True when it is done; else `refused` says why not. */
  async function act(address: 'steps' | 'cancel' | 'move' | 'order' | 'bank-payments' | 'refunds' | 'bank-refunds', body: Record<string, unknown>): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    key ??= crypto.randomUUID()
    const answer = await api.post(`${path}/${address}`, body, key)
    // With no answer at all it may have happened: the same press keeps its key.
    if (answer.ok || answer.failure.status > 0) key = null
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok || answer.failure.status === 409) await Promise.all([refresh(), readQuote()])
    busy.value = false
    return answer.ok
  }
  function startAgain() {
    refused.value = null
    key = null
  }

  const cause = ref<CancelCause>('student')
  const quote = shallowRef<RefundQuote | null>(null)
  const quoteFailure = ref<Failure | null>(null)
  let asked = 0
  async function readQuote() {
    const mine = ++asked
    const answer = await api.get<RefundQuote>(`${path}/refund-quote?cause=${cause.value}`)
    if (mine !== asked) return
    quote.value = answer.ok ? answer.value : null
    quoteFailure.value = answer.ok ? null : answer.failure
  }

  return { place, unread, loading, refresh, busy, refused, act, startAgain, cause, quote, quoteFailure, readQuote }
}
