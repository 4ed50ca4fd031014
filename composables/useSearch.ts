import { computed, onBeforeUnmount, onMounted, ref, shallowRef, watch } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { SearchAnswer, SearchHit } from '#shared/contract/lessons'
import { useApi } from './useApi'

const pauseMs = 250

/** Searching the lessons and what is said in their films, as it is typed. The words stand in the address, so a result can be gone back to. */
export function useSearch() {
  const route = useRoute()
  const router = useRouter()
  const api = useApi()
  const q = ref(typeof route.query.q === 'string' ? route.query.q : '')
  const hits = shallowRef<SearchHit[]>([])
  /** What the hits shown were found for; null before any search. */
  const foundFor = ref<string | null>(null)
  /** Nothing stood there as it was typed: these are words near it. */
  const spelling = ref(false)
  const busy = ref(false)
  const failure = ref<Failure | null>(null)
  let timer: ReturnType<typeof setTimeout> | undefined
  let turn = 0

  async function search(): Promise<void> {
    clearTimeout(timer)
    const words = q.value.trim()
    const mine = ++turn
    void router.replace({ query: { ...route.query, q: words || undefined }, hash: route.hash })
    if (words.length < 2) {
      hits.value = []
      foundFor.value = null
      failure.value = null
      busy.value = false
      return
    }
    busy.value = true
    const answer = await api.get<SearchAnswer>(`/api/search?q=${encodeURIComponent(words)}`)
    // A later search has overtaken this one.
    if (mine !== turn) return
    busy.value = false
    failure.value = answer.ok ? null : answer.failure
    if (!answer.ok) return
    hits.value = answer.value.items
    spelling.value = answer.value.spelling
    foundFor.value = words
  }

  watch(q, () => {
    clearTimeout(timer)
    timer = setTimeout(() => void search(), pauseMs)
  })
  onMounted(() => q.value && void search())
  onBeforeUnmount(() => clearTimeout(timer))
  const searching = computed(() => q.value.trim().length >= 2)
  return { q, hits, foundFor, spelling, busy, failure, searching, search }
}
