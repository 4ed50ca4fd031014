import { cpSync, existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { join } from 'node:path'
import pg from 'pg'
import { buildFingerprint } from '../../scripts/lib/build-fingerprint'
import { ensureSchool } from '../../scripts/lib/ensure-school'
import { testCluster } from '../../scripts/lib/own-cluster'
import { databaseUrl, ensureDatabase } from '../../scripts/lib/postgres/ensure-database'
import { startCluster } from '../../scripts/lib/postgres/start-cluster'
import { projectRoot } from '../../scripts/lib/project-root'
import { readOrMakeSecrets } from '../../scripts/lib/secrets'
import { readSettings } from '../../scripts/lib/settings'
import { applicationEnv, startStack, startStandIns, type Stack, type StackOptions, type StandIns } from '../../scripts/lib/start-stack'
import { withFileLock } from '../../scripts/lib/with-file-lock'
import type { S3Settings } from '../../server/adapters/storage/s3'

export type School = {
  url: string
  /** Web and worker, each of which a test may kill: `process.kill(school.stack.worker.mark()!.pid, 'SIGKILL')`; it is started again. */
  stack: Stack
  s3: NonNullable<StandIns['s3']>
  mail: NonNullable<StandIns['mail']>
  pay: NonNullable<StandIns['pay']>
  databaseUrl: string
  /** Settings for a storage client of the test's own. */
  storage: S3Settings
  stop: () => Promise<void>
}

/**
 * A whole school of a test's own, seeded up to an instant, on numbers nobody else uses.
 *
 * Seeding takes the longest, so it is done once for each instant and build; a school is a copy of that database and its stored files.
 *
 * @param name unlike any other that runs at the same time
 * @param until where the story stops; the demo's own instant when null
 */
export async function startSchool(name: string, until: string | null): Promise<School> {
  const { dataDir, testDatabasePort } = readSettings({ DATA_DIR: process.env.DATA_DIR, TEST_PGPORT: process.env.TEST_PGPORT })
  const secrets = readOrMakeSecrets(dataDir)
  const cluster = testCluster(dataDir, testDatabasePort, secrets)
  const owner = { name: 'witness', password: secrets.databasePassword }
  const lines: string[] = []
  const say = (line: string) => void lines.push(line)
  await startCluster(cluster, say)
  await ensureDatabase(cluster, { ...owner, mayCreateDatabases: true }, 'witness_mark')

  const [webPort, storagePort, mailPort, mailPagePort, payPort] = await freePorts(5)
  const options = (dir: string): StackOptions => ({
    dataDir: dir, secrets, databaseUrl: '', host: '127.0.0.1', say, env: { PATH: process.env.PATH, HOME: process.env.HOME },
    webPort: webPort ?? 0, storagePort: storagePort ?? 0, mailPort: mailPort ?? 0, mailPagePort: mailPagePort ?? 0, payPort: payPort ?? 0,
  })

  const instant = (until ?? 'demo').toLowerCase().replace(/[^a-z0-9]+/g, '_')
  const template = `school_${instant}`
  const kept = join(dataDir, 'e2e', template)
  await withFileLock(join(dataDir, `${template}.lock`), async () => {
    // The seed runs the application's own services, so any change of the sources may change the school.
    const stamp = join(kept, 'built-from')
    const fingerprint = buildFingerprint(projectRoot)
    if (existsSync(stamp) && readFileSync(stamp, 'utf8') === fingerprint) return
    await dropDatabase(cluster, template)
    rmSync(kept, { recursive: true, force: true })
    mkdirSync(kept, { recursive: true })
    const seeding = options(kept)
    const standIns = await startStandIns(seeding)
    try {
      await ensureSchool({ cluster, owner, database: template, env: applicationEnv(seeding), until: until ?? undefined }, say)
    }
    finally {
      await standIns.close()
    }
    writeFileSync(stamp, fingerprint)
  })

  const database = `e2e_${name.toLowerCase().replace(/[^a-z0-9]+/g, '_')}`
  const dir = join(dataDir, 'e2e', database)
  await dropDatabase(cluster, database)
  rmSync(dir, { recursive: true, force: true })
  cpSync(kept, dir, { recursive: true })
  await query(databaseUrl(cluster, cluster.admin, 'postgres'), `CREATE DATABASE "${database}" TEMPLATE "${template}" STRATEGY file_copy OWNER witness`)
  const own = { ...options(dir), databaseUrl: databaseUrl(cluster, owner, database) }
  const { s3, mail, pay, close } = await startStandIns(own)
  if (!s3 || !mail || !pay) throw new Error('a test\'s school has stand-ins')
  const stack = await startStack(own).catch(async (thrown: unknown) => {
    await close()
    throw thrown
  })
  const env = applicationEnv(own)
  return {
    url: stack.url, stack, s3, mail, pay, databaseUrl: own.databaseUrl,
    storage: {
      endpoint: s3.url, publicEndpoint: s3.url, region: env.NUXT_STORAGE_REGION ?? '', bucket: env.NUXT_STORAGE_BUCKET ?? '',
      accessKey: secrets.storageAccessKey, secretKey: secrets.storageSecretKey,
    },
    async stop() {
      await stack.stop()
      await close()
      writeFileSync(join(dir, 'said.log'), lines.join('\n'))
      await dropDatabase(cluster, database)
    },
  }
}

const dropDatabase = (cluster: ReturnType<typeof testCluster>, name: string) => query(databaseUrl(cluster, cluster.admin, 'postgres'), `DROP DATABASE IF EXISTS "${name}" WITH (FORCE)`)

async function query(url: string, sql: string): Promise<void> {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    await client.query(sql)
  }
  finally {
    await client.end()
  }
}

/** Held open together, so that they are different. */
async function freePorts(count: number): Promise<number[]> {
  const servers = await Promise.all(Array.from({ length: count }, () => new Promise<ReturnType<typeof createServer>>((resolve) => {
    const server = createServer().listen(0, '127.0.0.1', () => resolve(server))
  })))
  const ports = servers.map(server => (server.address() as AddressInfo).port)
  await Promise.all(servers.map(server => new Promise(resolve => server.close(resolve))))
  return ports
}
