/**
 * `npm run asks [-- rounds]`: in each round a hundred visitors ask for the last place of a cohort at once, over HTTP, at two web processes
 * of one school of their own, and open their links at once. Never more places may be taken than there are, and the numbers of the list must be 1 to
 * 100 in the order of the audit record. Prints a line a round; ends with 1 when any is not so.
 */
import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { MikroORM, type EntityManager } from '@mikro-orm/postgresql'
import pg from 'pg'
import { dbConfig } from '#server/db/config'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { migrations } from '#server/db/migrations/index'
import { readConfig } from '#server/utils/config'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { askRound, type AskRound } from './lib/ask-round'
import { ensureBuild } from './lib/ensure-build'
import { testCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { Problem } from './lib/problem'
import { projectRoot } from './lib/project-root'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'
import { waitUntil } from './lib/wait-until'
import { startMail } from './stand-ins/mail/start-mail'
import { startS3 } from './stand-ins/s3/start-s3'

const asksARound = 100
const say = (line: string) => void process.stdout.write(`${line}\n`)

await runCommand(async () => {
  const [text = '10'] = process.argv.slice(2)
  const rounds = Number(text)
  if (!Number.isInteger(rounds) || rounds < 1 || rounds > 90) throw new Problem('Say how many rounds, as a whole number from 1 to 90: npm run asks -- 10')
  const settings = readSettings(process.env)
  await ensureBuild(settings.dataDir, say)
  const stack = await ownStack(settings)
  let bad = 0
  try {
    for (let round = 1; round <= rounds; round += 1) {
      const began = performance.now()
      const came = await askRound({ url: stack.urls[0] ?? '', urls: stack.urls, em: stack.em, app: stack.app, code: `ASK-${10 + round}`, asks: asksARound, makeCohort: places => makeCohort(stack.em(), `ASK-${10 + round}`, places) })
      const well = isWell(came)
      if (!well) bad += 1
      say(`round ${String(round).padStart(2)}  ${came.asked} asks taken   places taken ${came.taken} of ${came.places} (${came.newOnes} new)   ${came.waiting} on the list   numbers 1 to ${asksARound} ${came.numbersWhole ? 'whole' : 'NOT WHOLE'}   audit record ${came.auditInOrder ? 'in the same order' : 'IN ANOTHER ORDER'}   ${((performance.now() - began) / 1000).toFixed(1)} s${well ? '' : '   <- not so'}`)
      for (const refused of new Set(came.refused)) say(`          refused: ${refused} (${came.refused.filter(one => one === refused).length} times)`)
    }
  }
  finally {
    await stack.close()
  }
  if (bad > 0) throw new Problem(`${bad} of ${rounds} rounds did not come out as they must.`)
  say(`${rounds} rounds, ${rounds * asksARound} asks: never more places than there are, and no number left out or given twice.`)
  process.exit(0)
})

function isWell({ asked, places, taken, newOnes, waiting, numbersWhole, auditInOrder, refused }: AskRound): boolean {
  return asked === asksARound && taken === places && newOnes === 1 && waiting === asksARound - 1 && numbersWhole && auditInOrder && refused.length === 0
}

async function makeCohort(em: EntityManager, code: string, places: number): Promise<Cohort> {
  const startsOn = dayAfter(schoolDay(new Date()), 120)
  return em.transactional(async (tx) => {
    const course = await tx.findOne(Course, { code: 'asks' }) ?? tx.create(Course, { code: 'asks', title: 'A course to ask for', summary: '', createdAt: new Date() })
    return tx.create(Cohort, { course, code, name: code, startsOn, endsOn: dayAfter(startsOn, 90), pattern: 'evenings', places, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', lastListNumber: 0, createdAt: new Date() })
  })
}

interface OwnStack { urls: string[], em: () => EntityManager, app: { config: ReturnType<typeof readConfig> }, close: () => Promise<void> }

/** A database, storage and mail of this run's own, and two web processes of the build. */
async function ownStack(settings: ReturnType<typeof readSettings>): Promise<OwnStack> {
  const secrets = readOrMakeSecrets(settings.dataDir)
  const cluster = testCluster(settings.dataDir, settings.testDatabasePort, secrets)
  await startCluster(cluster, say)
  const owner = { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: true }
  const home = await ensureDatabase(cluster, owner, 'witness_mark')
  const name = `test_${process.pid}_asks`
  const databaseUrl = await ensureDatabase(cluster, owner, name)
  const base = dbConfig(databaseUrl)
  const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false } })
  await orm.migrator.up()
  const dir = mkdtempSync(join(tmpdir(), 'witness-mark-asks-'))
  const credentials = { accessKeyId: 'asks-key', secretAccessKey: 'asks-secret' }
  const ports = await freePorts(2)
  const urls = ports.map(port => `http://127.0.0.1:${port}`)
  const s3 = await startS3({ dir: join(dir, 'storage'), credentials, bucket: 'evidence', origins: urls, port: 0 })
  const mail = await startMail({ dir: join(dir, 'mail'), smtpPort: 0, pagePort: 0 })
  const env: NodeJS.ProcessEnv = {
    ...process.env,
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true', NODE_ENV: 'production', AUTH_ORIGIN: `${urls[0]}/api/auth`, NUXT_AUTH_SECRET: secrets.authSecret, NUXT_DATABASE_URL: databaseUrl, NUXT_ROLE: 'web', NUXT_MIGRATE_ON_START: 'false',
    NUXT_STORAGE_ENDPOINT: s3.url, NUXT_STORAGE_PUBLIC_ENDPOINT: s3.url, NUXT_STORAGE_BUCKET: 'evidence', NUXT_STORAGE_ACCESS_KEY: credentials.accessKeyId, NUXT_STORAGE_SECRET_KEY: credentials.secretAccessKey,
    NUXT_MAIL_URL: mail.smtpUrl, NUXT_MAIL_FROM: 'Sallowbeck <school@sallowbeck.example>', NUXT_PUBLIC_URL: urls[0],
    // Nobody pays here.
    NUXT_PAY_KEY: 'sk_test_nobody_pays', NUXT_PAY_WEBHOOK_SECRET: 'whsec_nobody_pays', NUXT_PAY_ENDPOINT: 'http://127.0.0.1:9',
  }
  const webs = ports.map(port => startWeb(env, port))
  async function close(): Promise<void> {
    for (const web of webs) await end(web)
    await orm.close(true)
    await s3.close()
    await mail.close()
    const client = new pg.Client({ connectionString: home })
    await client.connect()
    await client.query(`drop database if exists ${name} with (force)`)
    await client.end()
    rmSync(dir, { recursive: true, force: true })
  }
  const well = await waitUntil(async () => (await Promise.all(urls.map(url => fetch(`${url}/api/health`).then(answer => answer.status > 0, () => false)))).every(Boolean), 60_000, 100)
  if (!well) {
    await close()
    throw new Problem('The web processes did not come up within a minute.')
  }
  return { urls, em: () => orm.em.fork(), app: { config: readConfig(env) }, close }
}

function startWeb(env: NodeJS.ProcessEnv, port: number): ChildProcess {
  return spawn(process.execPath, [join(projectRoot, '.output/server/index.mjs')], { env: { ...env, HOST: '127.0.0.1', NITRO_HOST: '127.0.0.1', PORT: String(port), NITRO_PORT: String(port) }, stdio: ['ignore', 'ignore', 'inherit'] })
}

async function end(web: ChildProcess): Promise<void> {
  if (web.exitCode !== null) return
  web.kill('SIGTERM')
  const stopped = await Promise.race([once(web, 'exit').then(() => true), new Promise<false>(done => setTimeout(done, 10_000, false))])
  if (!stopped) web.kill('SIGKILL')
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
