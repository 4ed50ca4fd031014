import { computed } from 'vue'
import { toFailure } from '#shared/contract/failure'

/**
 * Data a page needs, read on the server for the first paint and in the browser afterwards.
 * `failure` is a sentence to show; `loading` is for the skeleton. Not awaited: a page opens at once and fills in.
 */
export function useRead<T>(path: string | (() => string)) {
  const { data, error, status, refresh } = useFetch<T>(path, { key: typeof path === 'string' ? path : path(), deep: false, retry: false })
  const failure = computed(() => (error.value ? toFailure(error.value) : null))
  const loading = computed(() => status.value === 'pending' && !data.value)
  return { data, failure, loading, refresh }
}
