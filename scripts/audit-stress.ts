/**
 * `npm run audit:stress [-- writers events kills]`: 8 writers put 2,000 events into the audit record while a sealer is killed 10 times;
 * then the record must be whole, and must not be once a row was changed by hand. In a database of its own, dropped afterwards.
 */
import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { setTimeout as wait } from 'node:timers/promises'
import { MikroORM, type EntityManager } from '@mikro-orm/postgresql'
import pg from 'pg'
import { dbConfig } from '../server/db/config'
import { migrations } from '../server/db/migrations/index'
import { sealAudit } from '../server/services/audit/seal-audit'
import { verifyAudit } from '../server/services/audit/verify-audit'
import { recordEvent } from '../server/utils/record-event'
import { testCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { Problem } from './lib/problem'
import { projectRoot } from './lib/project-root'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'

await runCommand(async () => {
  const [writers = 8, events = 2000, kills = 10] = process.argv.slice(2).map(Number)
  if (![writers, events, kills].every(count => Number.isInteger(count) && count > 0)) throw new Problem('Say how many writers, events and kills, as whole numbers.')
  const { url, drop } = await ownDatabase()
  const base = dbConfig(url)
  const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false } })
  try {
    await orm.migrator.up()
    const started = Date.now()
    const killed = await writeWhileKilled(orm, url, { writers, events, kills })
    await sealAudit(orm.em.fork(), 'end of stress')
    const whole = await verifyAudit(orm.em.fork(), new Date())
    say(`${writers} writers wrote ${events} events, the sealer was killed ${killed} times, in ${((Date.now() - started) / 1000).toFixed(1)} s.`)
    say(`Verified: ${whole.links} links, ${whole.seals} seals, ${whole.problems.length === 0 ? 'whole' : whole.problems.map(one => one.sentence).join(' ')}`)
    if (whole.problems.length > 0 || whole.links !== events || killed !== kills) throw new Problem('The audit record did not come through.')

    const at = 1 + Math.floor(Math.random() * events)
    await changeByHand(orm.em.fork(), at)
    const [found] = (await verifyAudit(orm.em.fork(), new Date())).problems
    say(`After changing the event of link ${at} by hand: ${found?.sentence ?? 'nothing was found'}`)
    if (found?.number !== at) throw new Problem('A row changed by hand was not found.')
  }
  finally {
    await orm.close(true)
    await drop()
  }
})

async function ownDatabase(): Promise<{ url: string, drop: () => Promise<void> }> {
  const settings = readSettings(process.env)
  const secrets = readOrMakeSecrets(settings.dataDir)
  const cluster = testCluster(settings.dataDir, settings.testDatabasePort, secrets)
  await startCluster(cluster, say)
  const name = `test_${process.pid}_audit`
  const owner = { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: true }
  const home = await ensureDatabase(cluster, owner, 'witness_mark')
  const url = await ensureDatabase(cluster, owner, name)
  return {
    url,
    async drop() {
      const client = new pg.Client({ connectionString: home })
      await client.connect()
      await client.query(`drop database if exists ${name} with (force)`)
      await client.end()
    },
  }
}

async function writeWhileKilled(orm: MikroORM, url: string, { writers, events, kills }: { writers: number, events: number, kills: number }): Promise<number> {
  let left = events
  let killed = 0
  async function write(): Promise<void> {
    while (left > 0) {
      left -= 1
      const number = events - left
      await orm.em.fork().transactional(async (tx) => {
        recordEvent(tx, { actor: 'stress', action: 'written', subject: `event:${number}`, detail: { number } })
        await tx.flush()
        // Some transactions stay open a while: their rows become visible after later ones were sealed.
        if (number % 7 === 0) await wait(20 + Math.random() * 60)
      })
      // Slow enough that every kill falls while events are still coming; a sealer needs about a second and a half to start.
      await wait(Math.random() * 2 * 1500 * kills / (events / writers))
      while (left < events - ((killed + 1) / kills) * events && killed < kills) await wait(10)
    }
  }
  async function seal(): Promise<void> {
    while (killed < kills) {
      const sealer: ChildProcess = spawn(process.execPath, ['--import', 'tsx', 'scripts/lib/audit-stress-sealer.ts'], {
        cwd: projectRoot, stdio: ['ignore', 'pipe', 'inherit'], env: { ...process.env, NUXT_DATABASE_URL: url, TSX_TSCONFIG_PATH: 'scripts/tsconfig.json' },
      })
      const ended = once(sealer, 'exit')
      await Promise.race([once(sealer.stdout!, 'data'), ended])
      if (sealer.exitCode !== null) throw new Problem('The sealer would not start.')
      await wait(5 + Math.random() * 120)
      sealer.kill('SIGKILL')
      await ended
      killed += 1
    }
  }
  await Promise.all([seal(), ...Array.from({ length: writers }, write)])
  return killed
}

/** Switches the triggers off, as somebody with the owner's password could, and changes one detail. */
async function changeByHand(em: EntityManager, link: number): Promise<void> {
  const run = (sql: string, values: unknown[] = []) => em.getConnection().execute(sql, values)
  await run('grant update on audit_event to current_user')
  await run('alter table audit_event disable trigger user')
  await run(`update audit_event set detail = replace(detail, '"number":', '"number": ') where id = (select event_id from audit_link where number = ?)`, [link])
  await run('alter table audit_event enable trigger user')
}

function say(line: string): void {
  process.stdout.write(`${line}\n`)
}
