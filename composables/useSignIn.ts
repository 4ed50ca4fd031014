import { ref } from 'vue'

/** Signing in: one sentence when it does not work, and a checked local path to go on to when it does. */
export function useSignIn() {
  const { signIn } = useAuth()
  const route = useRoute()
  const busy = ref(false)
  const failure = ref<string | null>(null)

  async function submit(values: { email: string, password: string }) {
    busy.value = true
    failure.value = null
    try {
      const answer = await signIn('credentials', { ...values, redirect: false }) as { error?: string | null, status?: number } | undefined
      if (answer?.error) failure.value = 'That e-mail and password do not go together.'
      else await navigateTo(localPath(route.query.callbackUrl), { external: true, replace: true })
    }
    catch (thrown) {
      const status = (thrown as { statusCode?: number, response?: { status?: number } }).statusCode ?? (thrown as { response?: { status?: number } }).response?.status
      failure.value = status === 429
        ? 'Too many wrong tries. Wait fifteen minutes, or set a new password.'
        : 'The school’s server cannot be reached. Try again in a moment.'
    }
    finally {
      busy.value = false
    }
  }

  return { busy, failure, submit }
}

/** Only a path of this site; anything else goes to the start. */
function localPath(wanted: unknown): string {
  if (typeof wanted !== 'string') return '/'
  const path = URL.canParse(wanted) ? new URL(wanted) : null
  const local = path ? (path.origin === useRequestURL().origin ? `${path.pathname}${path.search}` : '/') : wanted
  return local.startsWith('/') && !local.startsWith('//') && !local.startsWith('/\\') ? local : '/'
}
