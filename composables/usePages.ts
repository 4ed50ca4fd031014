import { computed, ref, shallowRef, watch } from 'vue'
import type { Page } from '#shared/contract/views'
import { useApi } from './useApi'
import { useRead } from './useRead'

/** A list that comes a page at a time: the first for the first paint, `more` for the next. `first` is that page with what else it says. */
export function usePages<Item>(path: string | (() => string)) {
  const pathNow = typeof path === 'string' ? () => path : path
  const api = useApi()
  const { data, failure, loading, refresh } = useRead<Page<Item>>(path)
  const later = shallowRef<Item[]>([])
  const next = ref<string | null>(null)
  const busy = ref(false)
  watch(data, (page) => {
    later.value = []
    next.value = page?.next ?? null
  }, { immediate: true })
  const items = computed(() => [...(data.value?.items ?? []), ...later.value])

  async function more() {
    if (!next.value || busy.value) return
    busy.value = true
    const answer = await api.get<Page<Item>>(`${pathNow()}${pathNow().includes('?') ? '&' : '?'}after=${encodeURIComponent(next.value)}`)
    if (answer.ok) {
      later.value = [...later.value, ...answer.value.items]
      next.value = answer.value.next
    }
    busy.value = false
  }
  return { first: data, items, next, failure, loading, busy, more, refresh }
}
