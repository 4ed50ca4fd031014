import { computed } from 'vue'
import { menuRolesOf } from './menu-for'

export type MyRole = 'student' | 'instructor' | 'admin' | 'safety'

/** The signed-in person as the session says; the server checks again on every call. */
export function useMe() {
  const { data, signOut } = useAuth()
  const me = computed(() => (data.value as { user?: { id: string, name: string, email: string, roles: MyRole[], unit: 'mm' | 'in', places: string[] } } | null)?.user ?? null)
  const firstName = computed(() => me.value?.name.split(' ')[0] ?? '')
  function is(...roles: MyRole[]) {
    return roles.some(role => me.value?.roles.includes(role))
  }
  /** Where this person starts. */
  const home = computed(() => {
    if (is('instructor')) return '/review'
    if (is('admin')) return '/places'
    if (is('safety')) return '/shop-board'
    if (me.value && menuRolesOf(me.value).every(role => role === 'alumni')) return '/shelf'
    return me.value ? '/bench' : '/login'
  })
  return { me, firstName, is, home, signOut: () => signOut({ callbackUrl: '/login' }) }
}
