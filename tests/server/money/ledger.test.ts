import Papa from 'papaparse'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { LedgerLine, type LedgerKind } from '#server/db/entities/LedgerLine'
import { PurchaseOrder, Sponsor } from '#server/db/entities/Sponsor'
import { User } from '#server/db/entities/User'
import { emptyPlace } from '#server/services/places/empty-place'
import type { LedgerRow, MoneyBookView, OpenMoneyView } from '#shared/contract/money'
import { schoolDay, startOfDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeMoneySchool, type MoneySchool } from './money-school'

let harness: Harness, api: Api, school: MoneySchool, corin: Caller, today: string
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeMoneySchool(harness, { places: 60 })
  corin = await api.as(school.corin)
  today = schoolDay(harness.app.clock.schoolNow())
  await book()
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

const names = ['Agnes Wetherlam', '=SUM(A1:A9)', '@Wen Sallis', 'Zoë "Zo" Łuk, junior']

/** Four booked places with a deposit each, some with more; 30 lines in all. */
async function book(): Promise<void> {
  await school.em().transactional(async (tx) => {
    const places = names.map((name, at) => tx.create(BenchPlace, {
      ...emptyPlace, cohort: tx.getReference(Cohort, school.cohortId), name, email: `payer${at}@sallowbeck.example`, state: 'deposit-paid', slot: at + 1, depositPaidAt: startOfDay(dayAfter(today, -40)), createdAt: new Date(),
    }))
    tx.persist(places)
    let count = 0
    const line = (place: BenchPlace, kind: LedgerKind, amountMinor: number, on: string) => {
      count += 1
      tx.persist(tx.create(LedgerLine, { place, kind, purpose: 'deposit', amountMinor, currency: 'GBP', payment: null, refund: null, reference: kind === 'bank' && count === 2 ? '-1+1' : `ref ${count}`, by: tx.getReference(User, school.corin.id), at: startOfDay(on), writtenAt: new Date() }))
    }
    places.forEach(place => line(place, 'bank', 35_000, dayAfter(today, -40)))
    for (let at = 0; at < 24; at += 1) line(places[0]!, 'bank', 100 + (at % 3), dayAfter(today, -at))
    line(places[1]!, 'bank-refund', -5000, dayAfter(today, -1))
    line(places[2]!, 'bank-refund', -2550, today)
    const sponsor = tx.create(Sponsor, { organisation: 'Hexley Row Rebuild Ltd', contact: 'Morag Stanyon', email: 'morag@hexley.example', createdAt: new Date() })
    tx.persist(tx.create(PurchaseOrder, { place: places[3]!, sponsor, number: 'HRR-7', amountMinor: 245_000, currency: 'GBP', receivedAt: startOfDay(dayAfter(today, -40)), dueAt: startOfDay(dayAfter(today, -10)), takenBy: tx.getReference(User, school.corin.id) }))
    Object.assign(places[3]!, { state: 'confirmed' })
  })
}

const read = async (query = '') => (await corin.get<MoneyBookView>(`/api/ledger${query}`)).body

async function all(query: string): Promise<LedgerRow[]> {
  const rows: LedgerRow[] = []
  let next: string | null = null
  do {
    const page: MoneyBookView = await read(`?limit=7&${query}${next ? `&after=${encodeURIComponent(next)}` : ''}`)
    rows.push(...page.items)
    next = page.next
  } while (next)
  return rows
}

it('sums what came, what went and what is there', async () => {
  // By hand: 4 x 350.00 and 8 each of 1.00, 1.01 and 1.02 came, 1,424.24; 50.00 and 25.50 went.
  const { sums } = await read()
  expect([sums.in, sums.out, sums.moved, sums.balance].map(one => one.minor)).toEqual([142_424, -7550, 0, 134_874])
  // Due: four times 2,450.00 less what is there.
  expect(sums.due).toEqual({ minor: 4 * 245_000 - 134_874, currency: 'GBP' })
})

it.each(['newest', 'oldest', 'amount'])('pages through every line once, %s first', async (sort) => {
  const rows = await all(`sort=${sort}`)
  expect(new Set(rows.map(row => row.id)).size).toBe(30)
  const keys = rows.map(row => sort === 'amount' ? Math.abs(row.amount.minor) : Date.parse(row.at))
  expect(keys).toEqual([...keys].sort((a, b) => sort === 'oldest' ? a - b : b - a))
})

it('finds by name, address and reference, taking wildcards as they are, and sums what it finds', async () => {
  expect((await read('?search=agnes')).sums.in.minor).toBe(37_424)
  expect((await read('?search=payer2@')).items.map(row => row.amount.minor)).toEqual([-2550, 35_000])
  expect((await read('?search=ref+30')).items).toHaveLength(1)
  expect((await read('?search=%25')).items).toEqual([])
  expect((await read('?search=_')).items).toEqual([])
  expect((await read('?cohort=NON-99')).items).toEqual([])
  expect((await read('?kind=bank-refund')).sums).toMatchObject({ in: { minor: 0 }, out: { minor: -7550 } })
})

it('takes days as the school\'s, the first and the last included', async () => {
  const days = await all(`from=${dayAfter(today, -2)}&until=${dayAfter(today, -1)}`)
  expect(new Set(days.map(row => schoolDay(new Date(row.at))))).toEqual(new Set([dayAfter(today, -2), dayAfter(today, -1)]))
  expect(days).toHaveLength(3)
})

it('gives the same lines as a file in which no cell is a formula and each amount is a number', async () => {
  const answer = await corin.get<string>('/api/ledger/csv?sort=oldest')
  expect(answer.headers.get('content-disposition')).toBe('attachment; filename="ledger.csv"')
  const text = answer.body
  const { data } = Papa.parse<Record<string, string>>(text.replace(/^\uFEFF/, ''), { header: true, skipEmptyLines: true })
  expect(data).toHaveLength(30)
  for (const row of data) for (const cell of Object.values(row)) expect(cell).not.toMatch(/^[=+\-@\t\r]/)
  expect(data.find(row => row.Name?.includes('SUM'))?.Name).toBe('\'=SUM(A1:A9)')
  expect(data.find(row => row.Name?.includes('Wen'))?.Name).toBe('\'@Wen Sallis')
  expect(data.some(row => row.Reference === '\'-1+1')).toBe(true)
  expect(data.some(row => row.Name === 'Zoë "Zo" Łuk, junior')).toBe(true)
  const pence = (column: string) => data.reduce((sum, row) => sum + Math.round(Number(row[column] || 0) * 100), 0)
  expect([pence('In'), pence('Out')]).toEqual([142_424, 7550])
})

it('lists what is owed, soonest first, with the days it is late', async () => {
  const { due, refunds } = (await corin.get<OpenMoneyView>('/api/money/open')).body
  expect(refunds).toEqual([])
  expect(due.map(row => [row.place.name, row.amount.minor, row.how, row.daysLate])).toEqual([
    ['Zoë "Zo" Łuk, junior', 210_000, 'purchase order', 10],
    ['@Wen Sallis', 212_550, 'card or bank', 0],
    ['=SUM(A1:A9)', 215_000, 'card or bank', 0],
    ['Agnes Wetherlam', 245_000 - 37_424, 'card or bank', 0],
  ])
  // The course starts in 100 days.
  expect(due.map(row => row.dueOn)).toEqual([dayAfter(today, -10), dayAfter(today, 72), dayAfter(today, 72), dayAfter(today, 72)])
  expect(due[0]?.order).toBe('HRR-7')
})

it.each([
  ['a day that is none', '?from=2026-02-30', 'input_invalid'], ['an order there is not', '?sort=largest', 'input_invalid'], ['a kind there is not', '?kind=cash', 'input_invalid'],
  ['a page of nothing', '?limit=0', 'input_invalid'], ['a NUL in the search', '?search=a%00b', 'input_invalid'], ['a page of another list', '?after=WyJhIiwxXQ', 'page_unknown'], ['a page that is none', '?after=%F0%9F', 'page_unknown'],
])('refuses %s', async (_what, query, code) => {
  expect(await corin.get(`/api/ledger${query}`)).toMatchObject({ status: 422, body: { code } })
})

it('never changes: the database refuses to rewrite, remove or empty it', async () => {
  const run = (sql: string) => school.em().getConnection().execute(sql)
  await expect(run('update ledger_line set amount_minor = 1')).rejects.toThrow(/never changed/)
  await expect(run('delete from ledger_line')).rejects.toThrow(/never changed/)
  await expect(run('truncate ledger_line cascade')).rejects.toThrow(/never changed/)
})
