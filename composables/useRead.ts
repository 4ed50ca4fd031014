import { computed } from 'vue'
import { toFailure } from '#shared/contract/failure'

/**
 * Data a page needs, read on the server for the first paint and in the browser afterwards.
 * `failure` is a sentence to show; `loading` is for the skeleton. Not awaited: a page opens at once and fills in.
 * What stands behind a tab is read `later`, in the browser alone.
 */
export function useRead<T>(path: string | (() => string), { later = false }: { later?: boolean } = {}) {
  const { data, error, status, refresh } = useFetch<T>(path, { key: typeof path === 'string' ? path : path(), deep: false, retry: false, server: !later, lazy: later })
  const failure = computed(() => (error.value ? toFailure(error.value) : null))
  const loading = computed(() => status.value === 'pending' && !data.value)
  return { data, failure, loading, refresh }
}
