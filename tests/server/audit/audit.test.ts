import { createHash } from 'node:crypto'
import { afterEach, beforeEach, expect, it } from 'vitest'
import type { EntityManager } from '@mikro-orm/postgresql'
import { sealAudit } from '#server/services/audit/seal-audit'
import { verifyAudit } from '#server/services/audit/verify-audit'
import { recordEvent } from '#server/utils/record-event'
import { openHarness, type Harness } from '../harness'

let harness: Harness
beforeEach(async () => {
  harness = await openHarness()
})
afterEach(() => harness?.close())

const em = (): EntityManager => harness.app.orm.em.fork()

async function happen(count: number, at = new Date()): Promise<void> {
  await em().transactional(async (tx) => {
    for (let index = 0; index < count; index++) recordEvent(tx, { actor: 'tester', action: 'counted', subject: `thing:${index}`, detail: { index, b: 1, a: 'é' }, at: new Date(at.getTime() + index) })
  })
}

/** What somebody with the owner's password could do. */
async function tamper(sql: string): Promise<void> {
  const tables = ['audit_event', 'audit_link', 'audit_seal']
  const run = (text: string) => em().getConnection().execute(text)
  for (const table of tables) {
    await run(`grant all on ${table} to current_user`)
    await run(`alter table ${table} disable trigger user`)
  }
  await run(sql)
  for (const table of tables) await run(`alter table ${table} enable trigger user`)
}

it('numbers what was committed, chains each hash over the one before, and finds the chain whole', async () => {
  await happen(3)
  expect(await sealAudit(em(), 'minute')).toBe(3)
  await happen(2)
  expect(await sealAudit(em(), 'release:x')).toBe(2)
  const verdict = await verifyAudit(em(), new Date())
  expect(verdict).toMatchObject({ links: 5, seals: 2, problems: [] })

  // The first hash by hand: SHA-256 over 64 zeros, a line break and the event with sorted keys.
  const [first] = await em().getConnection().execute<{ hash: string, id: string, at: Date, detail: string }[]>('select l.hash, e.id, e.at, e.detail from audit_link l join audit_event e on e.id = l.event_id where l.number = 1')
  const at = new Date(first!.at).toISOString().replace('Z', '000Z')
  const row = `{"action":"counted","actor":"tester","at":"${at}","detail":${JSON.stringify(first!.detail)},"id":"${first!.id}","number":1,"subject":"thing:0"}`
  expect(first!.hash).toBe(createHash('sha256').update(`${'0'.repeat(64)}\n${row}`).digest('hex'))
})

it('gives a row that was committed late the next number, whatever its time says', async () => {
  await happen(2, new Date('2026-03-26T12:00:00Z'))
  await sealAudit(em(), 'minute')
  await happen(1, new Date('2026-03-26T11:00:00Z'))
  await sealAudit(em(), 'minute')
  const numbers = await em().getConnection().execute<{ at: Date }[]>('select e.at from audit_link l join audit_event e on e.id = l.event_id order by l.number')
  expect(new Date(numbers[2]!.at).toISOString()).toBe('2026-03-26T11:00:00.000Z')
  expect((await verifyAudit(em(), new Date())).problems).toEqual([])
})

it('does not seal a minute in which nothing happened, and does seal a release', async () => {
  await happen(1)
  await sealAudit(em(), 'minute')
  await sealAudit(em(), 'minute')
  expect((await verifyAudit(em(), new Date())).seals).toBe(1)
  await sealAudit(em(), 'release:y')
  expect((await verifyAudit(em(), new Date())).seals).toBe(2)
})

it('numbers more than one batch without a gap', async () => {
  await happen(2345)
  expect(await sealAudit(em(), 'minute')).toBe(2345)
  expect(await verifyAudit(em(), new Date())).toMatchObject({ links: 2345, problems: [] })
})

it('never chains twice when two sealers run at once', async () => {
  await happen(50)
  const counts = await Promise.all([sealAudit(em(), 'minute'), sealAudit(em(), 'minute'), sealAudit(em(), 'minute')])
  expect(counts.sort((a, b) => a - b)).toEqual([0, 0, 50])
})

it.each([
  ['an event', `update audit_event set detail = '{}' where id = (select event_id from audit_link where number = 3)`, 'hash-differs', 3],
  ['an event\'s time by a microsecond', `update audit_event set at = at + interval '1 microsecond' where id = (select event_id from audit_link where number = 2)`, 'hash-differs', 2],
  ['a hash', `update audit_link set hash = repeat('a', 64) where number = 4`, 'hash-differs', 4],
  ['a link in the middle, taken out', 'delete from audit_link where number = 2', 'gap', 2],
  ['the tail, taken off', 'delete from audit_link where number >= 4', 'tail-missing', 4],
  ['a seal', `update audit_seal set hash = repeat('b', 64)`, 'seal-differs', 5],
])('finds %s changed by hand and names the row', async (_, sql, kind, number) => {
  await happen(5)
  await sealAudit(em(), 'minute')
  await tamper(sql)
  expect((await verifyAudit(em(), new Date())).problems[0]).toMatchObject({ kind, number })
})

it('reports rows unsealed for over five minutes, and not younger ones', async () => {
  const now = new Date()
  await happen(1, new Date(now.getTime() - 4 * 60_000))
  expect((await verifyAudit(em(), now)).problems).toEqual([])
  await happen(2, new Date(now.getTime() - 6 * 60_000))
  const [problem] = (await verifyAudit(em(), now)).problems
  expect(problem).toMatchObject({ kind: 'unsealed' })
  expect(problem!.sentence).toContain('2 events have')
})

it.each(['update audit_event set actor = \'somebody\'', 'delete from audit_event', 'truncate audit_event cascade', 'update audit_link set number = 9', 'delete from audit_seal', 'update audit_event set id = gen_random_uuid()'])('refuses "%s" from the application', async (sql) => {
  await happen(1)
  await sealAudit(em(), 'minute')
  await expect(em().getConnection().execute(sql)).rejects.toThrow(/permission denied|never changed/)
})

it('still refuses by trigger when the grants are put back', async () => {
  await happen(1)
  await em().getConnection().execute('grant all on audit_event to current_user')
  await expect(em().getConnection().execute('update audit_event set actor = \'somebody\'')).rejects.toThrow(/never changed/)
})
