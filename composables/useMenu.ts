import { menuFor, menuRolesOf, type MenuItem } from '~/composables/menu-for'

/** The signed-in person and their menu, for the bar. Rights are the server's; this only decides which words are shown. */
export function useMenu() {
  const { data } = useAuth()
  const pages = new Set(useRouter().getRoutes().map(page => page.path))
  const route = useRoute()

  const person = computed(() => data.value?.user ?? null)
  const items = computed<MenuItem[]>(() => {
    return menuFor(person.value ? menuRolesOf(person.value) : [], path => pages.has(path))
  })
  const home = computed(() => items.value[0]?.path ?? '/')
  const isHere = (item: MenuItem): boolean => route.path === item.path || route.path.startsWith(`${item.path}/`)

  return { person, items, home, isHere }
}
