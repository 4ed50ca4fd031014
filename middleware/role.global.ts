import { useMe } from '~/composables/useMe'

declare module '#app' {
  interface PageMeta {
    /** Roles this page is for; absent: everybody signed in; 'anybody': open. */
    roles?: ('student' | 'instructor' | 'admin' | 'safety')[] | 'anybody'
  }
}

/** Sends people where they can do something. A convenience: the server checks every call by itself. */
export default defineNuxtRouteMiddleware(async (to) => {
  if (to.meta.roles === 'anybody') return
  const { me, is } = useMe()
  if (!me.value) return navigateTo({ path: '/login', query: { callbackUrl: to.fullPath } })
  const roles = to.meta.roles
  if (Array.isArray(roles) && !is(...roles)) return navigateTo('/forbidden')
})
