/**
 * `npm run kill [-- times]`: kills the worker with SIGKILL in the middle of scoring, again and again, in a school of its own; then every
 * version asked for must have one result set, whole, and none may have waited over twenty seconds.
 */
import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import pg from 'pg'
import { CriterionResult } from '../server/db/entities/CriterionResult'
import { ScoreSet } from '../server/db/entities/ScoreSet'
import { Submission } from '../server/db/entities/Submission'
import { askForRelease } from '../server/services/submissions/ask-for-release'
import type { FoundSubmission } from '../server/services/submissions/find-submission'
import { gatherEvidence } from '../server/services/submissions/gather-evidence'
import { startDraft } from '../server/services/submissions/start-draft'
import type { App } from '../server/utils/app'
import { readConfig } from '../server/utils/config'
import { startApp } from '../server/utils/start-app'
import { judgeSubmission } from '../shared/domain/rubric/judge-submission'
import { stageAsDue } from '../shared/domain/rubric/stage-as-due'
import { makeSchool, type TestSchool } from '../tests/server/review/school'
import { clearFor, read, walkTo } from '../tests/server/walk'
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
import { startS3 } from './stand-ins/s3/start-s3'

const longestWaitSeconds = 20
const say = (line: string) => void process.stdout.write(`${line}\n`)

interface Round { submission: string, killed: boolean, intoMs: number, waitedSeconds: number }

await runCommand(async () => {
  const [text = '20'] = process.argv.slice(2)
  const times = Number(text)
  if (!Number.isInteger(times) || times < 1) throw new Problem('Say how often to kill, as a whole number: npm run kill -- 20')
  const settings = readSettings(process.env)
  await ensureBuild(settings.dataDir, say)
  const stack = await ownStack(settings)
  try {
    const school = await makeSchool(stack)
    await clearFor(school, school.imre)
    const rounds = await killWhileScoring(stack, school, times)
    const bad = await check(stack.app, rounds)
    const killed = rounds.filter(one => one.killed)
    const longest = Math.max(...rounds.map(one => one.waitedSeconds))
    say(`${killed.length} kills in the middle of scoring, ${rounds.length} submissions; longest wait ${longest.toFixed(1)} s.`)
    if (killed.length < times) throw new Problem(`Only ${killed.length} of ${times} kills fell into scoring.`)
    if (bad > 0) throw new Problem(`${bad} of ${rounds.length} submissions did not come through.`)
  }
  finally {
    await stack.close()
  }
  process.exit(0)
})

interface OwnStack { app: App, env: NodeJS.ProcessEnv, close: () => Promise<void> }

/** A database, storage and mail of this run's own, and an app in this process in the web's place. */
async function ownStack(settings: ReturnType<typeof readSettings>): Promise<OwnStack> {
  const secrets = readOrMakeSecrets(settings.dataDir)
  const cluster = testCluster(settings.dataDir, settings.testDatabasePort, secrets)
  await startCluster(cluster, say)
  const owner = { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: true }
  const home = await ensureDatabase(cluster, owner, 'witness_mark')
  const name = `test_${process.pid}_kill`
  const databaseUrl = await ensureDatabase(cluster, owner, name)
  const dir = mkdtempSync(join(tmpdir(), 'witness-mark-kill-'))
  const credentials = { accessKeyId: 'kill-key', secretAccessKey: 'kill-secret' }
  const origin = 'http://127.0.0.1:3000'
  const s3 = await startS3({ dir: join(dir, 'storage'), credentials, bucket: 'evidence', origins: [origin], port: 0 })
  const mail = await startMail({ dir: join(dir, 'mail'), smtpPort: 0, pagePort: 0 })
  const env: NodeJS.ProcessEnv = {
    ...process.env,
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true', NODE_ENV: 'production', AUTH_ORIGIN: `${origin}/api/auth`, NUXT_AUTH_SECRET: secrets.authSecret, NUXT_DATABASE_URL: databaseUrl,
    NUXT_STORAGE_ENDPOINT: s3.url, NUXT_STORAGE_PUBLIC_ENDPOINT: s3.url, NUXT_STORAGE_BUCKET: 'evidence', NUXT_STORAGE_ACCESS_KEY: credentials.accessKeyId, NUXT_STORAGE_SECRET_KEY: credentials.secretAccessKey,
    NUXT_PAY_KEY: 'sk_test_nobody_pays', NUXT_PAY_WEBHOOK_SECRET: 'whsec_nobody_pays', NUXT_PAY_ENDPOINT: 'http://127.0.0.1:9',
    NUXT_MAIL_URL: mail.smtpUrl, NUXT_MAIL_FROM: 'Sallowbeck <school@sallowbeck.example>', NUXT_PUBLIC_URL: origin,
  }
  const app = await startApp(readConfig({ ...env, NUXT_ROLE: 'web' }))
  return {
    app,
    env: { ...env, NUXT_ROLE: 'worker', NUXT_MIGRATE_ON_START: 'false', NITRO_HOST: '127.0.0.1', PORT: '0', NITRO_PORT: '0' },
    async close() {
      await app.close()
      await s3.close()
      await mail.close()
      const client = new pg.Client({ connectionString: home })
      await client.connect()
      await client.query(`drop database if exists ${name} with (force)`)
      await client.end()
      rmSync(dir, { recursive: true, force: true })
    },
  }
}

/** One submission a round: asked, taken up, the worker killed within it, a new worker half a second later as the supervisor would. */
async function killWhileScoring({ app, env }: OwnStack, school: TestSchool, times: number): Promise<Round[]> {
  const rounds: Round[] = []
  let worker = startWorker(env)
  try {
    for (let round = 0; rounds.filter(one => one.killed).length < times && round < times * 3; round += 1) {
      const submission = await readyToAsk(app, school, round)
      await askForRelease(app.orm.em.fork(), app, school.imre, submission, undefined)
      const asked = performance.now()
      await until(() => isActive(app, submission), 60_000, 'no worker took the work up')
      const intoMs = Math.random() * 60
      await wait(intoMs)
      worker.kill('SIGKILL')
      await once(worker, 'exit')
      const killed = !await isScored(app, submission)
      await wait(500)
      worker = startWorker(env)
      await until(() => isScored(app, submission), 60_000, `submission ${submission} was never scored`)
      const waitedSeconds = (performance.now() - asked) / 1000
      rounds.push({ submission, killed, intoMs, waitedSeconds })
      say(`${String(rounds.length).padStart(3)}  killed ${intoMs.toFixed(0).padStart(3)} ms in  ${killed ? 'before its results' : 'after its results '}  scored ${waitedSeconds.toFixed(1).padStart(5)} s after Ask`)
    }
  }
  finally {
    worker.kill('SIGKILL')
  }
  return rounds
}

function startWorker(env: NodeJS.ProcessEnv): ChildProcess {
  return spawn(process.execPath, [join(projectRoot, '.output/server/index.mjs')], { env, stdio: ['ignore', 'ignore', 'inherit'] })
}

/** A first bowl with its eight lands read, on a head of its own. */
async function readyToAsk(app: App, school: TestSchool, round: number): Promise<string> {
  const head = await school.anotherHead(`KIL-${1000 + round}`)
  await walkTo(school, 70, head)
  const { submission } = await startDraft(app.orm.em.fork(), app, school.imre, head, 70, {})
  for (const spot of ['12', '1:30', '3', '4:30', '6', '7:30', '9', '10:30']) await read({ app }, school, submission.id, { quantity: 'seat-land', values: [1.6 + Math.random() / 10], cylinder: 1, side: 'intake', spot })
  return submission.id
}

async function isActive(app: App, submission: string): Promise<boolean> {
  const rows = await app.orm.em.fork().getConnection().execute<{ state: string }[]>('select state from pgboss.job where name = \'score-submission\' and data ->> \'submissionId\' = ?', [submission])
  return rows.some(row => row.state !== 'created')
}

async function isScored(app: App, submission: string): Promise<boolean> {
  return (await app.orm.em.fork().findOneOrFail(Submission, submission)).state === 'scored'
}

async function until(there: () => Promise<boolean>, longestMs: number, otherwise: string): Promise<void> {
  const end = performance.now() + longestMs
  while (!await there()) {
    if (performance.now() > end) throw new Problem(`${otherwise} within ${longestMs / 1000} s.`)
    await wait(2)
  }
}

/** Each version once, with exactly the results that judging its evidence again gives, and soon enough. @returns how many did not come through */
async function check(app: App, rounds: readonly Round[]): Promise<number> {
  let bad = 0
  for (const { submission, waitedSeconds } of rounds) {
    const em = app.orm.em.fork()
    const row = await em.findOneOrFail(Submission, submission, { populate: ['head.student', 'head.cohort', 'head.casting', 'head.rubric'] })
    const sets = await em.find(ScoreSet, { submission })
    const results = await em.find(CriterionResult, { set: { submission } }, { orderBy: { position: 'asc' } })
    const { evidence } = await gatherEvidence(em, row as FoundSubmission)
    const again = judgeSubmission(stageAsDue(row.head.$.rubric.$.rubric, row.op), evidence).results
    const problems = [
      sets.length === 1 ? '' : `${sets.length} result sets of one version`,
      JSON.stringify(results.map(one => [one.criterion, one.state, one.value])) === JSON.stringify(again.map(one => [one.criterion, one.state, one.value])) ? '' : `${results.length} results where ${again.length} are due`,
      waitedSeconds <= longestWaitSeconds ? '' : `waited ${waitedSeconds.toFixed(1)} s`,
    ].filter(Boolean)
    if (problems.length > 0) {
      bad += 1
      say(`${submission}: ${problems.join(', ')}`)
    }
  }
  return bad
}
