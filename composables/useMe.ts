import { computed } from 'vue'

export type MyRole = 'student' | 'instructor' | 'admin' | 'safety'

/** The signed-in person as the session says; the server checks again on every call. */
export function useMe() {
  const { data, signOut } = useAuth()
  const me = computed(() => (data.value as { user?: { id: string, name: string, email: string, roles: MyRole[], unit: 'mm' | 'in' } } | null)?.user ?? null)
  const firstName = computed(() => me.value?.name.split(' ')[0] ?? '')
  function is(...roles: MyRole[]) {
    return roles.some(role => me.value?.roles.includes(role))
  }
  /** Where this person starts. */
  const home = computed(() => {
    if (is('instructor')) return '/review'
    if (is('admin')) return '/people'
    if (is('safety')) return '/shop-board'
    return me.value ? '/bench' : '/login'
  })
  return { me, firstName, is, home, signOut: () => signOut({ callbackUrl: '/login' }) }
}
