import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import type { App } from '../../server/utils/app'
import { readConfig } from '../../server/utils/config'
import { startApp } from '../../server/utils/start-app'
import { testCluster } from '../lib/own-cluster'
import { ensureDatabase } from '../lib/postgres/ensure-database'
import { startCluster } from '../lib/postgres/start-cluster'
import { readOrMakeSecrets } from '../lib/secrets'
import type { Settings } from '../lib/settings'
import { startMail } from '../stand-ins/mail/start-mail'
import { startPay, type PayStandIn } from '../stand-ins/pay/start-pay'
import { startS3 } from '../stand-ins/s3/start-s3'
import { KeptProcess } from './kept-process'

export interface OwnStack { app: App, url: string, pay: PayStandIn, processes: KeptProcess[], close: () => Promise<void> }

/** A database, stand-ins, web and worker of this run's own; the app in this process looks and never works. */
export async function ownStack(settings: Settings, say: (line: string) => void): Promise<OwnStack> {
  const secrets = readOrMakeSecrets(settings.dataDir)
  const cluster = testCluster(settings.dataDir, settings.testDatabasePort, secrets)
  await startCluster(cluster, say)
  const owner = { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: true }
  const home = await ensureDatabase(cluster, owner, 'witness_mark')
  const name = `test_${process.pid}_deposits`
  const databaseUrl = await ensureDatabase(cluster, owner, name)
  const dir = mkdtempSync(join(tmpdir(), 'witness-mark-deposits-'))
  const webPort = await freePort()
  const url = `http://127.0.0.1:${webPort}`
  const credentials = { accessKeyId: 'deposits-key', secretAccessKey: 'deposits-secret' }
  const s3 = await startS3({ dir: join(dir, 'storage'), credentials, bucket: 'evidence', origins: [url], port: 0 })
  const mail = await startMail({ dir: join(dir, 'mail'), smtpPort: 0, pagePort: 0 })
  const pay = await startPay({ dir: join(dir, 'pay'), key: secrets.payKey, webhookSecret: secrets.payWebhookSecret, webhookUrl: `${url}/api/payments/webhook`, port: 0 })
  const env: NodeJS.ProcessEnv = {
    ...process.env,
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true', NODE_ENV: 'production', AUTH_ORIGIN: `${url}/api/auth`, NUXT_AUTH_SECRET: secrets.authSecret, NUXT_DATABASE_URL: databaseUrl, NUXT_PUBLIC_URL: url,
    NUXT_STORAGE_ENDPOINT: s3.url, NUXT_STORAGE_PUBLIC_ENDPOINT: s3.url, NUXT_STORAGE_BUCKET: 'evidence', NUXT_STORAGE_ACCESS_KEY: credentials.accessKeyId, NUXT_STORAGE_SECRET_KEY: credentials.secretAccessKey,
    NUXT_MAIL_URL: mail.smtpUrl, NUXT_MAIL_FROM: 'Sallowbeck <school@sallowbeck.example>',
    NUXT_PAY_KEY: secrets.payKey, NUXT_PAY_WEBHOOK_SECRET: secrets.payWebhookSecret, NUXT_PAY_ENDPOINT: pay.url,
  }
  const app = await startApp(readConfig({ ...env, NUXT_ROLE: 'web' }))
  const launch = (role: string, port: number) => new KeptProcess(role, { ...env, NUXT_ROLE: role, NUXT_MIGRATE_ON_START: 'false', NITRO_HOST: '127.0.0.1', HOST: '127.0.0.1', PORT: String(port), NITRO_PORT: String(port) })
  const processes = [launch('web', webPort), launch('worker', 0)]
  return {
    app, url, pay, processes,
    async close() {
      for (const one of processes) one.end()
      await app.close()
      await Promise.all([s3.close(), mail.close(), pay.close()])
      const client = new pg.Client({ connectionString: home })
      await client.connect()
      await client.query(`drop database if exists ${name} with (force)`)
      await client.end()
      rmSync(dir, { recursive: true, force: true })
    },
  }
}

async function freePort(): Promise<number> {
  const server = createServer()
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address() as AddressInfo
  await new Promise(resolve => server.close(resolve))
  return port
}
