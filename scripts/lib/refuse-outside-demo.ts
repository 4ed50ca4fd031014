import { isLoopback } from './is-loopback'
import { Problem } from './problem'

/**
 * The demo school has well-known sign-ins, and the stand-ins let anybody in: they are for one machine that nobody else reaches.
 *
 * @throws {Problem} when the environment says production, or anything would answer beyond this machine
 */
export function refuseOutsideDemo(env: Readonly<Record<string, string | undefined>>, host: string): void {
  const instead = 'For a real school set the configuration by hand and run the image in docker/, or: node .output/server/index.mjs'
  if (env.NODE_ENV === 'production') {
    throw new Problem(`NODE_ENV is "production", and this command starts the demo school with its well-known sign-ins. ${instead}`)
  }
  if (!isLoopback(host)) throw new Problem(`HOST is "${host}", which others can reach; the demo school answers on this machine alone. ${instead}`)
  for (const name of ['AUTH_ORIGIN', 'NUXT_PUBLIC_URL'] as const) {
    const address = env[name]
    if (address === undefined || address === '') continue
    if (!URL.canParse(address)) throw new Problem(`${name} should be an address such as http://127.0.0.1:3000${name === 'AUTH_ORIGIN' ? '/api/auth' : ''}, and is "${address}".`)
    if (!isLoopback(new URL(address).hostname)) throw new Problem(`${name} is "${address}", which is not this machine. ${instead}`)
  }
}
