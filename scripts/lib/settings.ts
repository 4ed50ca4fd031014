import { resolve } from 'node:path'
import { Problem } from './problem'
import { projectRoot } from './project-root'

/** Where everything of this copy of the project lives and answers; each from the environment, each with a default. */
export type Settings = {
  dataDir: string
  host: string
  webPort: number
  databasePort: number
  testDatabasePort: number
  storagePort: number
  mailPort: number
  mailPagePort: number
  payPort: number
  /** Addresses of services that are not ours to start; null where the stand-in does. */
  given: { databaseUrl: string | null, storageEndpoint: string | null, mailUrl: string | null, payKey: string | null }
}

type Env = Readonly<Record<string, string | undefined>>

/**
 * @throws {Problem} when a number in the environment is not a TCP port
 */
export function readSettings(env: Env): Settings {
  const port = (name: string, otherwise: number): number => {
    const text = env[name]
    if (text === undefined || text === '') return otherwise
    const value = Number(text)
    if (!/^\d+$/.test(text) || value < 1 || value > 65535) throw new Problem(`${name} should be a number from 1 to 65535, and is "${text}".`)
    return value
  }
  const given = (name: string) => env[name] || null
  return {
    dataDir: resolve(projectRoot, env.DATA_DIR || '.data'),
    host: env.HOST || '127.0.0.1',
    webPort: port('PORT', 3000),
    databasePort: port('PGPORT', 54329),
    testDatabasePort: port('TEST_PGPORT', 54330),
    storagePort: port('STORAGE_PORT', 9000),
    mailPort: port('MAIL_PORT', 2525),
    mailPagePort: port('MAIL_PAGE_PORT', 8025),
    payPort: port('PAY_PORT', 8030),
    given: { databaseUrl: given('NUXT_DATABASE_URL'), storageEndpoint: given('NUXT_STORAGE_ENDPOINT'), mailUrl: given('NUXT_MAIL_URL'), payKey: given('NUXT_PAY_KEY') },
  }
}
