import { computed, onBeforeUnmount, onMounted, ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { ReturnedAnswer } from '#shared/contract/money'
import type { PayAnswer, PlaceLinkView } from '#shared/contract/places'
import { useApi } from './useApi'
import { useRead } from './useRead'

const firstWaitMs = 2000
const longestWaitMs = 15_000

/**
 * A place as whoever has its mailed link sees it.
 *
 * Looking holds nothing (mail scanners look too): in a browser the link is then opened by `open`, which takes a free place or a turn
 * on the list. After the card page `followPayment` asks until the server knows how the payment went.
 */
export function usePlaceLink(token: string) {
  const path = `/api/place-links/${encodeURIComponent(token)}`
  const api = useApi()
  const { data: view, failure: unread, loading, refresh } = useRead<PlaceLinkView>(path)
  const refused = ref<Failure | null>(null)
  const busy = ref<'opening' | 'paying' | 'passing' | null>(null)
  const following = ref(false)
  /** Follows for longer than a card usually takes. */
  const slow = ref(false)

  async function turn(what: 'opening' | 'passing', address: string): Promise<boolean> {
    busy.value = what
    const answer = await api.post<PlaceLinkView>(`${path}/${address}`)
    busy.value = null
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) view.value = answer.value
    return answer.ok
  }
  const open = () => turn('opening', 'open')
  const pass = () => turn('passing', 'pass')

  /** Goes to the card page. Stays busy while the browser leaves, so that nobody presses twice. */
  async function pay(purpose: 'deposit' | 'balance') {
    busy.value = 'paying'
    const answer = await api.post<PayAnswer>(`${path}/pay`, { purpose })
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) return window.location.assign(answer.value.url)
    busy.value = null
    // What could be paid a minute ago may be gone: show how it stands now.
    await refresh()
  }

  let timer: ReturnType<typeof setTimeout> | undefined
  let wait = firstWaitMs
  async function look() {
    // Asks the school to look at the card service itself, in case its message is late or lost.
    await api.post<ReturnedAnswer>('/api/payments/returned', { token })
    await refresh()
    if (!following.value) return
    if (!unread.value && view.value && !view.value.payingSince) {
      stopFollowing()
      return
    }
    wait = Math.min(longestWaitMs, wait * 1.25)
    slow.value = wait > 4 * firstWaitMs
    timer = setTimeout(look, wait)
  }
  function followPayment() {
    following.value = true
    wait = firstWaitMs
    void look()
  }
  function stopFollowing() {
    clearTimeout(timer)
    following.value = false
    slow.value = false
  }
  onBeforeUnmount(() => clearTimeout(timer))

  // The school's clock, moved on by ours: the two need not show the same day.
  const passed = ref(0)
  let ticker: ReturnType<typeof setInterval> | undefined
  let since = 0
  let stamp = ''
  onMounted(() => {
    since = Date.now()
    ticker = setInterval(() => {
      if (view.value && view.value.now !== stamp) {
        stamp = view.value.now
        since = Date.now()
      }
      passed.value = Date.now() - since
    }, 5000)
  })
  onBeforeUnmount(() => clearInterval(ticker))
  /** Milliseconds until the held place is let go; null when none is held. */
  const heldForMs = computed(() => view.value?.heldUntil ? new Date(view.value.heldUntil).getTime() - new Date(view.value.now).getTime() - passed.value : null)

  return { view, unread, loading, refresh, refused, busy, open, pass, pay, following, slow, followPayment, stopFollowing, heldForMs }
}
