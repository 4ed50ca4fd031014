/**
 * `npm run deposits [-- 100] [--kills 10] [--sweep-now]`: a school of its own takes that many deposits, with every fault of the card
 * stand-in mixed in and web and worker killed at random, then waits for the sweep and sets the ledger beside the processor's list.
 *
 * Visitors do what people do: ask, open the link, pay (some are declined first, some press twice, some come back from the page and some
 * do not), and try again when nothing answers; one in ten gives the place up again. `--sweep-now` asks the worker for the sweep instead of waiting for its minute.
 */
import { setTimeout as wait } from 'node:timers/promises'
import { BenchPlace } from '../server/db/entities/BenchPlace'
import { LedgerLine } from '../server/db/entities/LedgerLine'
import { Mail } from '../server/db/entities/Mail'
import { Receipt } from '../server/db/entities/Receipt'
import { Killer } from './deposits/killer'
import { makeSchool } from './deposits/make-school'
import { ownStack, type OwnStack } from './deposits/own-stack'
import { visit } from './deposits/visit'
import { compareLedger, printComparison } from './lib/compare-ledger'
import { ensureBuild } from './lib/ensure-build'
import { Problem } from './lib/problem'
import { runCommand } from './lib/run-command'
import { readSettings } from './lib/settings'

const say = (line = '') => void process.stdout.write(`${line}\n`)
const atOnce = 5
/** Longer than a killed worker's job waits before another takes it up, with the sweep behind it. */
const settlesWithinMs = 10 * 60_000

await runCommand(async () => {
  const { deposits, kills, sweepNow } = readArguments(process.argv.slice(2))
  const settings = readSettings(process.env)
  await ensureBuild(settings.dataDir, say)
  const stack = await ownStack(settings, say)
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

/** Waits until every payment is in the ledger with its receipt made, and no work on money is left. */
async function settled({ app }: OwnStack, deposits: number): Promise<void> {
  const end = performance.now() + settlesWithinMs
  for (let told = 0; ; told += 1) {
    const em = app.orm.em.fork()
    const lines = await em.count(LedgerLine, { kind: 'card' })
    const papers = await em.count(Receipt, { key: { $ne: null } })
    const [work] = await em.getConnection().execute<{ n: number }[]>('select count(*)::int as n from pgboss.job where name in (\'apply-payment\', \'send-refund\', \'make-receipt\') and state in (\'created\', \'retry\', \'active\')')
    if (lines >= deposits && papers >= deposits && work?.n === 0) return
    if (told % 30 === 29) say(`  still waiting: ${lines} lines, ${papers} receipts made, ${work?.n} jobs left`)
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
