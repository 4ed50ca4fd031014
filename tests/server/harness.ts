import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startMail, type MailStandIn } from '../../scripts/stand-ins/mail/start-mail'
import { startPay, type PayStandIn } from '../../scripts/stand-ins/pay/start-pay'
import { startS3, type S3StandIn } from '../../scripts/stand-ins/s3/start-s3'
import type { App } from '../../server/utils/app'
import type { Config } from '../../server/utils/config'
import { startApp } from '../../server/utils/start-app'
import { freshDatabase } from './fresh-database'

export type Harness = {
  app: App
  config: Config
  databaseUrl: string
  /** The stand-ins in this process, with their fault counters. */
  s3: S3StandIn
  mail: MailStandIn
  /** Tells nobody until a test says `pay.tell(address)`. */
  pay: PayStandIn
  close: () => Promise<void>
}

const origin = 'http://127.0.0.1:3000'

/**
 * Everything a use case needs, on a database of its own: real PostgreSQL; storage, mail and card payments by their stand-ins.
 * Open it in `beforeAll`, close it in `afterAll`; the worker is not started, a test runs the handler it means.
 */
export async function openHarness(change: Partial<Config> = {}): Promise<Harness> {
  const dir = mkdtempSync(join(tmpdir(), 'witness-mark-'))
  const database = await freshDatabase()
  const credentials = { accessKeyId: 'test-key', secretAccessKey: 'test-secret' }
  const s3 = await startS3({ dir: join(dir, 'storage'), credentials, bucket: 'evidence', origins: [origin], port: 0 })
  const mail = await startMail({ dir: join(dir, 'mail'), smtpPort: 0, pagePort: 0 })
  const pay = await startPay({ dir: join(dir, 'pay'), key: 'sk_test_for_tests', webhookSecret: 'whsec_for_tests', webhookUrl: null, port: 0 })
  const config: Config = {
    authOrigin: `${origin}/api/auth`,
    authSecret: 'a secret for tests that is long enough',
    databaseUrl: database.url,
    role: 'web',
    migrateOnStart: false,
    storage: { endpoint: s3.url, publicEndpoint: s3.url, region: 'eu-west-1', bucket: 'evidence', accessKey: credentials.accessKeyId, secretKey: credentials.secretAccessKey },
    mail: { url: mail.smtpUrl, from: 'Sallowbeck <school@sallowbeck.example>' },
    pay: { key: 'sk_test_for_tests', webhookSecret: 'whsec_for_tests', endpoint: pay.url },
    publicUrl: origin,
    ...change,
  }
  const app = await startApp(config)
  return {
    app,
    config,
    databaseUrl: database.url,
    s3,
    mail,
    pay,
    async close() {
      await app.close()
      app.mail.close()
      await s3.close()
      await mail.close()
      await pay.close()
      await database.drop()
      rmSync(dir, { recursive: true, force: true })
    },
  }
}
