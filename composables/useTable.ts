import { refDebounced } from '@vueuse/core'
import { computed, ref, watch } from 'vue'
import { usePages } from './usePages'

/**
 * A long list's search, order and filters: kept in the page's address, so that a link or the way back finds the same rows, and sent
 * to the server, which does the work. Give the answer to `<OfficeTable>`.
 *
 * @param path of the list, `/api/places`
 * @param sorts what the list can be ordered by, the usual one first
 * @param filters names of further query values, each with what it is when nobody chose
 */
export function useTable<Row, Filter extends string = never>(path: string, { sorts, filters = {} as Record<Filter, string> }: { sorts: readonly { value: string, label: string }[], filters?: Record<Filter, string> }) {
  const route = useRoute()
  const router = useRouter()
  const given = (name: string, usual: string) => typeof route.query[name] === 'string' ? route.query[name] : usual
  const usualSort = sorts[0]?.value ?? ''
  const search = ref(given('search', ''))
  const sort = ref(given('sort', usualSort))
  const names = Object.keys(filters) as Filter[]
  const chosen = ref(Object.fromEntries(names.map(name => [name, given(name, filters[name])])) as Record<Filter, string>)
  const typed = refDebounced(search, 250)

  const query = computed(() => {
    const values = new URLSearchParams()
    if (typed.value.trim()) values.set('search', typed.value.trim())
    if (sort.value !== usualSort) values.set('sort', sort.value)
    for (const name of names) {
      const value = (chosen.value as Record<Filter, string>)[name]
      if (value && value !== filters[name]) values.set(name, value)
    }
    return values.toString()
  })
  watch(query, text => void router.replace({ query: Object.fromEntries(new URLSearchParams(text)) }))
  const pages = usePages<Row>(() => [path, query.value].filter(Boolean).join(path.includes('?') ? '&' : '?'))
  return { ...pages, search, sort, sorts, filters: chosen, query }
}
