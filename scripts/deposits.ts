/**
 * `npm run deposits [-- 100] [--kills 10] [--sweep-now]`: a school of its own takes that many deposits, with every fault of the card
 * stand-in mixed in and web and worker killed at random, then waits for the sweep and sets the ledger beside the processor's list.
 *
 * Visitors do what people do: ask, open the link, pay (some are declined first, some press twice, some come back from the page and some
 * do not), and try again when nothing answers; one in ten gives the place up again. `--sweep-now` asks the worker for the sweep instead of waiting for its minute.
 */
import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { request } from 'node:http'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { text } from 'node:stream/consumers'
import { setTimeout as wait } from 'node:timers/promises'
import pg from 'pg'
import { BenchPlace } from '../server/db/entities/BenchPlace'
import { Cohort } from '../server/db/entities/Cohort'
import { LedgerLine } from '../server/db/entities/LedgerLine'
import { Mail } from '../server/db/entities/Mail'
import { Receipt } from '../server/db/entities/Receipt'
import { User } from '../server/db/entities/User'
import { quoteRefund } from '../server/services/money/quote-refund'
import { cancelPlace } from '../server/services/places/cancel-place'
import { placeToken } from '../server/services/places/place-link'
import type { App } from '../server/utils/app'
import { readConfig } from '../server/utils/config'
import { startApp } from '../server/utils/start-app'
import { addDays, schoolDay } from '../shared/contract/school-day'
import { compareLedger, printComparison } from './lib/compare-ledger'
import { ensureBuild } from './lib/ensure-build'
import { testCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { Problem } from './lib/problem'
import { projectRoot } from './lib/project-root'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'
import { startMail } from './stand-ins/mail/start-mail'
import { startPay, type PayStandIn } from './stand-ins/pay/start-pay'
import { startS3 } from './stand-ins/s3/start-s3'

const say = (line = '') => void process.stdout.write(`${line}\n`)
const chance = (share: number) => Math.random() < share
const atOnce = 5
const cohortCode = 'DEP-26'
/** Longer than a killed worker's job waits before another takes it up, with the sweep behind it. */
const settlesWithinMs = 10 * 60_000
const visitorWaitsMs = 120_000

await runCommand(async () => {
  const { deposits, kills, sweepNow } = readArguments(process.argv.slice(2))
  const settings = readSettings(process.env)
  await ensureBuild(settings.dataDir, say)
  const stack = await ownStack(settings)
  let bad: number
  try {
    const corin = await makeSchool(stack.app, deposits)
    say(`${deposits} deposits, ${kills} kills, ${atOnce} visitors at once.`)
    const began = performance.now()
    const killer = new Killer(stack.processes, kills, deposits)
    let next = 0
    await Promise.all(Array.from({ length: atOnce }, async () => {
      while (next < deposits) {
        const n = next++
        await visit(stack, corin, n)
        await killer.oneMoreDone()
      }
    }))
    await killer.rest()
    say(`All have paid after ${((performance.now() - began) / 1000).toFixed(0)} s. ${stack.processes.map(one => `${one.name} was killed ${one.kills} times`).join(', ')}.`)
    if (sweepNow) await stack.app.boss.send('sweep-payments', {})
    await settled(stack, deposits)
    say(`Settled after ${((performance.now() - began) / 1000).toFixed(0)} s.\n`)
    bad = await check(stack, deposits)
  }
  finally {
    await stack.close()
  }
  if (bad > 0) throw new Problem(`${bad} things are not as they should be.`)
  process.exit(0)
})

function readArguments(args: string[]): { deposits: number, kills: number, sweepNow: boolean } {
  const at = args.indexOf('--kills')
  const kills = at < 0 ? 10 : Number(args[at + 1])
  const plain = args.filter((arg, index) => !arg.startsWith('--') && (at < 0 || index !== at + 1))
  const deposits = Number(plain[0] ?? 100)
  if (!Number.isInteger(deposits) || deposits < 1 || deposits > 500 || !Number.isInteger(kills) || kills < 0) throw new Problem('Say how many, as whole numbers: npm run deposits -- 100 --kills 10')
  return { deposits, kills, sweepNow: args.includes('--sweep-now') }
}

/** One of the application's processes, started again half a second after it is killed, as the supervisor would. */
class Kept {
  kills = 0
  private child: ChildProcess
  private ended = false

  constructor(readonly name: string, private readonly env: NodeJS.ProcessEnv) {
    this.child = this.start()
  }

  private start(): ChildProcess {
    const child = spawn(process.execPath, [join(projectRoot, '.output/server/index.mjs')], { env: this.env, stdio: ['ignore', 'ignore', 'pipe'] })
    child.stderr?.setEncoding('utf8').on('data', (chunk: string) => {
      // The stand-in's faults make the application say what it could not do; that is right, and too much to read.
      if (process.env.DEPOSITS_LOUD) process.stderr.write(`${this.name} | ${chunk}`)
    })
    child.once('exit', () => {
      if (!this.ended) setTimeout(() => this.ended || (this.child = this.start()), 500)
    })
    return child
  }

  kill() {
    this.kills += 1
    this.child.kill('SIGKILL')
  }

  end() {
    this.ended = true
    this.child.kill('SIGKILL')
  }
}

/** Kills one of the processes, whichever, as deposits go by; a moment after one is done, so that others are in the middle. */
class Killer {
  private done = 0
  private killed = 0
  constructor(private readonly processes: readonly Kept[], private readonly kills: number, private readonly deposits: number) {}

  async oneMoreDone() {
    this.done += 1
    if (this.killed < this.kills && this.done * (this.kills + 1) >= (this.killed + 1) * this.deposits) await this.one()
  }

  async rest() {
    while (this.killed < this.kills) {
      await this.one()
      await wait(1500)
    }
  }

  private async one() {
    this.killed += 1
    await wait(Math.random() * 400)
    this.processes[Math.floor(Math.random() * this.processes.length)]?.kill()
  }
}

interface OwnStack { app: App, url: string, pay: PayStandIn, processes: Kept[], close: () => Promise<void> }

/** A database, stand-ins, web and worker of this run's own; the app in this process looks and never works. */
async function ownStack(settings: ReturnType<typeof readSettings>): Promise<OwnStack> {
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
  const launch = (role: string, port: number) => new Kept(role, { ...env, NUXT_ROLE: role, NUXT_MIGRATE_ON_START: 'false', NITRO_HOST: '127.0.0.1', HOST: '127.0.0.1', PORT: String(port), NITRO_PORT: String(port) })
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

/** A cohort with a bench for everybody, at the handbook's prices, and the admin who gives places up for people. */
async function makeSchool(app: App, places: number): Promise<Pick<User, 'id'>> {
  return app.orm.em.fork().transactional(async (tx) => {
    const startsOn = addDays(schoolDay(app.clock.schoolNow()), 100)
    tx.persist(tx.create(Cohort, { code: cohortCode, name: 'Deposits', course: null, startsOn, endsOn: addDays(startsOn, 88), pattern: 'weeks', places, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', createdAt: new Date() }))
    const corin = tx.create(User, { email: 'corin@sallowbeck.example', name: 'Corin Ashdown', roles: ['admin'], passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
    tx.persist(corin)
    await tx.flush()
    return { id: corin.id }
  })
}

/** One visitor from the ask to the deposit, patient with whatever does not answer. */
async function visit({ app, url, pay }: OwnStack, corin: Pick<User, 'id'>, n: number): Promise<void> {
  const email = `visitor${n}@sallowbeck.example`
  // The school lets one network address ask ten times an hour: everybody has their own.
  const from = `127.${64 + Math.floor(n / 250)}.7.${1 + n % 250}`
  const call = (path: string, body: unknown = {}) => patiently(path, () => post(`${url}${path}`, body, from))
  await call(`/api/cohorts/${cohortCode}/asks`, { name: `Visitor Number${n}`, email })
  const place = await app.orm.em.fork().findOneOrFail(BenchPlace, { email })
  const token = placeToken(app, place)
  await call(`/api/place-links/${token}/open`)
  mixFaults(pay)
  const { url: page } = await call(`/api/place-links/${token}/pay`, { purpose: 'deposit' }) as { url: string }
  const press = (button: string) => fetch(`${page}/${button}`, { method: 'POST', redirect: 'manual' })
  if (chance(0.25)) await press(chance(0.5) ? 'declined' : 'insufficient')
  mixFaults(pay)
  await press('pay')
  if (chance(0.2)) await press('pay')
  // Somebody impatient goes on to pay again before any message came: there is nothing to pay, or the page says it is paid.
  if (chance(0.15)) await post(`${url}/api/place-links/${token}/pay`, { purpose: 'deposit' }, from).catch(() => undefined)
  if (chance(0.4)) await post(`${url}/api/payments/returned`, { token }, from).catch(() => undefined)
  if (n % 10 === 3) await giveUp(app, corin, place.id)
}

/** Switches on one fault or another, or none. What is left of an earlier one stays and meets somebody else. */
function mixFaults({ faults }: PayStandIn): void {
  const some = 1 + Math.floor(Math.random() * 3)
  const mixes: (() => void)[] = [
    () => (faults.webhooksLost += some), () => (faults.webhooksLost += 3), () => (faults.webhooksTwice += some), () => (faults.webhooksReversed += 3),
    () => Object.assign(faults, { webhooksLate: faults.webhooksLate + some, lateMs: 500 + Math.floor(Math.random() * 4000) }),
    () => (faults.api429Next += some), () => (faults.api500Next += some), () => (faults.responseLostNext += some), () => (faults.slowMs = Math.floor(Math.random() * 300)), () => (faults.slowMs = 0), () => undefined,
  ]
  mixes[Math.floor(Math.random() * mixes.length)]?.()
}

/** Waits until the deposit is known, gives the place up, and lets the worker send the money back. */
async function giveUp(app: App, corin: Pick<User, 'id'>, placeId: string): Promise<void> {
  const end = performance.now() + visitorWaitsMs
  while ((await app.orm.em.fork().findOneOrFail(BenchPlace, { id: placeId })).state === 'offered') {
    // Its message was lost: the sweep books it, and nobody waits for that here.
    if (performance.now() > end) return
    await wait(500)
    if (end - performance.now() < visitorWaitsMs - 8_000) return
  }
  const { back } = await quoteRefund(app.orm.em.fork(), app, { id: placeId }, { cause: 'student' })
  await cancelPlace(app.orm.em.fork(), app, corin, placeId, { cause: 'student', seenMinor: back.minor, note: '' })
}

async function post(address: string, body: unknown, localAddress: string): Promise<{ status: number, body: unknown }> {
  const { hostname, port, pathname } = new URL(address)
  return new Promise((resolve, reject) => {
    const sent = request({ hostname, port, path: pathname, method: 'POST', localAddress, headers: { 'content-type': 'application/json' }, timeout: 60_000 }, (answer) => {
      text(answer).then(said => resolve({ status: answer.statusCode ?? 0, body: said === '' ? null : JSON.parse(said) as unknown }), reject)
    })
    sent.once('timeout', () => sent.destroy(new Error('no answer within a minute')))
    sent.once('error', reject)
    sent.end(JSON.stringify(body))
  })
}

/** Again and again while nothing answers or it is the server's fault; anything else that is no success ends the run. */
async function patiently(what: string, work: () => Promise<{ status: number, body: unknown }>): Promise<unknown> {
  const end = performance.now() + visitorWaitsMs
  for (;;) {
    const answer = await work().catch(() => null)
    if (answer && answer.status < 300) return answer.body
    if (answer && answer.status < 500) throw new Problem(`${what} answered ${answer.status} ${JSON.stringify(answer.body)}`)
    if (performance.now() > end) throw new Problem(`${what} did not succeed within ${visitorWaitsMs / 1000} s; last ${answer ? `${answer.status} ${JSON.stringify(answer.body)}` : 'no answer'}`)
    await wait(300)
  }
}

/** Waits until every payment is in the ledger with its receipt made, and no work on money is left. */
async function settled({ app }: OwnStack, deposits: number): Promise<void> {
  const end = performance.now() + settlesWithinMs
  for (;;) {
    const em = app.orm.em.fork()
    const lines = await em.count(LedgerLine, { kind: 'card' })
    const papers = await em.count(Receipt, { key: { $ne: null } })
    const [work] = await em.getConnection().execute<{ n: number }[]>('select count(*)::int as n from pgboss.job where name in (\'apply-payment\', \'send-refund\', \'make-receipt\', \'sweep-payments\') and state in (\'created\', \'retry\', \'active\')')
    if (lines >= deposits && papers >= deposits && work?.n === 0) return
    if (performance.now() > end) {
      say(`Not settled within ${settlesWithinMs / 60_000} minutes: ${lines} lines, ${papers} receipts made, ${work?.n} jobs left.`)
      return
    }
    await wait(1000)
  }
}

/** @returns how many things are not as they should be */
async function check({ app, pay }: OwnStack, deposits: number): Promise<number> {
  let bad = printComparison(await compareLedger(app.orm, app.payments), say)
  const em = app.orm.em.fork()
  const want = (what: string, is: number, should: number) => {
    say(`${is === should ? 'yes' : 'NO '}  ${what}: ${is} of ${should}`)
    if (is !== should) bad += 1
  }
  say()
  const charges = pay.store.all('charges').filter(charge => charge.paid)
  want('charges at the processor, one a visitor', new Set(charges.map(charge => charge.metadata.payment)).size, deposits)
  want('charges in all', charges.length, deposits)
  const places = await em.find(BenchPlace, {})
  want('places booked, or given up after', places.filter(place => place.state === 'deposit-paid' || place.state === 'cancelled').length, deposits)
  const receipts = await em.find(Receipt, {}, { orderBy: { number: 'asc' } })
  want('receipts', receipts.length, deposits)
  want('receipts numbered 1, 2, 3 without a gap', receipts.filter((receipt, index) => receipt.number === index + 1).length, deposits)
  want('letters with a receipt, one each', await em.count(Mail, { key: { $in: receipts.map(receipt => `receipt:${receipt.id}`) } }), deposits)
  const cancelled = places.filter(place => place.state === 'cancelled').map(place => place.id)
  const refunds = await em.count(LedgerLine, { kind: 'card-refund', place: { $in: cancelled } })
  want('places given up whose money went back', refunds, cancelled.length)
  want('letters about it, one each', await em.count(Mail, { template: 'refund' }), cancelled.length)
  const states = pay.store.all('deliveries').map(one => one.state)
  say(`\nMessages of the processor: ${states.length}, of which lost ${states.filter(state => state === 'lost').length}, given up ${states.filter(state => state === 'given-up').length}.`)
  return bad
}
