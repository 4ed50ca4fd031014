import { join } from 'node:path'
import { startMail, type MailStandIn } from '../stand-ins/mail/start-mail'
import { startPay, type PayStandIn } from '../stand-ins/pay/start-pay'
import { startS3, type S3StandIn } from '../stand-ins/s3/start-s3'
import { Problem } from './problem'
import type { ProcessMark } from './process-record'
import { projectRoot } from './project-root'
import type { Secrets } from './secrets'
import { supervise, type Supervised } from './supervise'
import { waitUntil } from './wait-until'

export type StackOptions = {
  dataDir: string
  secrets: Secrets
  databaseUrl: string
  host: string
  webPort: number
  storagePort: number
  mailPort: number
  mailPagePort: number
  payPort: number
  /** Real services to use instead of the stand-ins. */
  given?: { storageEndpoint: string | null, mailUrl: string | null, payKey: string | null }
  env: Readonly<Record<string, string | undefined>>
  say: (line: string) => void
  onChange?: (running: ProcessMark[]) => void
}

export type StandIns = { s3: S3StandIn | null, mail: MailStandIn | null, pay: PayStandIn | null, close: () => Promise<void> }
export type Stack = { url: string, web: Supervised, worker: Supervised, stop: () => Promise<void> }

const bucket = 'witness-mark'

/** Storage, mail and card payments for this machine, where no real ones are given. */
export async function startStandIns(options: StackOptions): Promise<StandIns> {
  const { dataDir, secrets, host, given } = options
  const listening = (name: string, variable: string) => (thrown: unknown): never => {
    if ((thrown as { code?: string }).code === 'EADDRINUSE') throw new Problem(`Something else answers where the ${name} stand-in should. Stop it, or choose another number with ${variable}=<number>.`)
    throw thrown
  }
  const origins = [...new Set([webUrl(options), `http://localhost:${options.webPort}`])]
  const s3 = given?.storageEndpoint
    ? null
    : await startS3({ dir: join(dataDir, 'storage'), host, port: options.storagePort, bucket, origins, credentials: { accessKeyId: secrets.storageAccessKey, secretAccessKey: secrets.storageSecretKey } })
      .catch(listening('storage', 'STORAGE_PORT'))
  const mail = given?.mailUrl
    ? null
    : await startMail({ dir: join(dataDir, 'mail'), host, smtpPort: options.mailPort, pagePort: options.mailPagePort })
      .catch(async (thrown: unknown) => {
        await s3?.close()
        return listening('mail', 'MAIL_PORT or MAIL_PAGE_PORT')(thrown)
      })
  const pay = given?.payKey
    ? null
    : await startPay({
        dir: join(dataDir, 'pay'), host, port: options.payPort, key: secrets.payKey, webhookSecret: secrets.payWebhookSecret,
        webhookUrl: `${webUrl(options)}/api/payments/webhook`,
      }).catch(async (thrown: unknown) => {
        await Promise.all([s3?.close(), mail?.close()])
        return listening('card payment', 'PAY_PORT')(thrown)
      })
  return { s3, mail, pay, close: async () => void await Promise.all([s3?.close(), mail?.close(), pay?.close()]) }
}

const webUrl = ({ host, webPort }: Pick<StackOptions, 'host' | 'webPort'>) => `http://${host.includes(':') ? `[${host}]` : host}:${webPort}`

/** What every process of the application reads; a value the caller set stays. */
export function applicationEnv(options: StackOptions): Record<string, string | undefined> {
  const { secrets, env, host } = options
  const url = env.NUXT_PUBLIC_URL || webUrl(options)
  const storage = env.NUXT_STORAGE_ENDPOINT || `http://${host}:${options.storagePort}`
  return {
    ...env,
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true',
    AUTH_ORIGIN: env.AUTH_ORIGIN || `${url}/api/auth`,
    NUXT_AUTH_SECRET: env.NUXT_AUTH_SECRET || secrets.authSecret,
    NUXT_DATABASE_URL: options.databaseUrl,
    NUXT_STORAGE_ENDPOINT: storage,
    NUXT_STORAGE_PUBLIC_ENDPOINT: env.NUXT_STORAGE_PUBLIC_ENDPOINT || storage,
    NUXT_STORAGE_REGION: env.NUXT_STORAGE_REGION || 'eu-west-1',
    NUXT_STORAGE_BUCKET: env.NUXT_STORAGE_BUCKET || bucket,
    NUXT_STORAGE_ACCESS_KEY: env.NUXT_STORAGE_ACCESS_KEY || secrets.storageAccessKey,
    NUXT_STORAGE_SECRET_KEY: env.NUXT_STORAGE_SECRET_KEY || secrets.storageSecretKey,
    NUXT_MAIL_URL: env.NUXT_MAIL_URL || `smtp://${host}:${options.mailPort}`,
    NUXT_MAIL_FROM: env.NUXT_MAIL_FROM || 'Sallowbeck <school@sallowbeck.example>',
    // A key of one's own goes with the processor's own address; the stand-in's key with the stand-in.
    NUXT_PAY_KEY: env.NUXT_PAY_KEY || secrets.payKey,
    NUXT_PAY_WEBHOOK_SECRET: env.NUXT_PAY_WEBHOOK_SECRET || secrets.payWebhookSecret,
    NUXT_PAY_ENDPOINT: env.NUXT_PAY_ENDPOINT || (env.NUXT_PAY_KEY ? '' : `http://${host}:${options.payPort}`),
    NUXT_PUBLIC_URL: url,
  }
}

/**
 * Starts the built application as a web process and a worker, and waits until it says it is well.
 * Database and stand-ins are up already.
 *
 * @throws {Problem} when it does not come up, with what it said
 */
export async function startStack(options: StackOptions): Promise<Stack> {
  const env = applicationEnv(options)
  const url = webUrl(options)
  const server = join(projectRoot, '.output/server/index.mjs')
  const common = { ...env, NODE_ENV: 'production', NITRO_HOST: options.host, HOST: options.host }
  const all: Supervised[] = []
  const changed = () => options.onChange?.(all.flatMap(one => one.mark() ?? []))
  const launch = (name: string, more: Record<string, string>): Supervised => {
    const one = supervise(name, [server], { ...common, ...more }, options.say, changed)
    all.push(one)
    changed()
    return one
  }
  const web = launch('web', { NUXT_ROLE: 'web', PORT: String(options.webPort), NITRO_PORT: String(options.webPort) })
  // The same build answers requests in both roles; a worker's number is nobody's business, so it takes any.
  const worker = launch('worker', { NUXT_ROLE: 'worker', PORT: '0', NITRO_PORT: '0' })
  const stop = async () => void await Promise.all(all.map(one => one.stop()))

  const well = await waitUntil(async () => {
    if (all.some(one => one.hasGivenUp())) return true
    return fetch(`${url}/api/health`, { signal: AbortSignal.timeout(3000) }).then(answer => answer.ok, () => false)
  }, 60_000, 100)
  const ended = all.find(one => one.hasGivenUp())
  if (!well || ended) {
    const said = (ended ?? web).tail()
    await stop()
    throw new Problem(`The application did not come up. ${ended ? `The ${ended.name} process said:` : `${url}/api/health did not answer that all is well within a minute. The web process said:`}\n${said}`)
  }
  return { url, web, worker, stop }
}
