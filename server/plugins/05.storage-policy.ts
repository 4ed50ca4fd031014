import { defineNitroPlugin } from 'nitropack/runtime'

type Policy = Record<string, unknown>

/** Where the card processor's page is, unless another processor is named. */
const payPage = 'https://checkout.stripe.com'

/**
 * Lets pages show and send files at the storage's own origin, and forms lead to the card processor's page. Their addresses are known
 * when the process starts, not when it was built, so the built application moves between machines as it is.
 */
export default defineNitroPlugin(async (nitro) => {
  const address = process.env.NUXT_STORAGE_PUBLIC_ENDPOINT
  if (!address || !URL.canParse(address)) return
  const { origin } = new URL(address)
  nitro.hooks.hook('nuxt-security:routeRules', (rules) => {
    const headers = rules['/**']?.headers
    if (!headers || typeof headers.contentSecurityPolicy !== 'object') return
    const policy = headers.contentSecurityPolicy as Policy
    const base: Record<string, string[]> = {
      'img-src': ['\'self\'', 'data:', 'blob:'],
      'media-src': ['\'self\'', 'blob:'],
      // In development the page is told of changes over a socket on a number of its own.
      'connect-src': ['\'self\'', ...(import.meta.dev ? ['ws:'] : [])],
    }
    for (const [directive, sources] of Object.entries(base)) policy[directive] = [...sources, origin]
    policy['form-action'] = ['\'self\'', new URL(process.env.NUXT_PAY_ENDPOINT || payPage).origin]
  })
  // The module asked before this plugin was there.
  await nitro.hooks.callHook('nuxt-security:ready')
})
