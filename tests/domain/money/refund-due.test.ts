import { describe, expect, it } from 'vitest'
import { refundDue, type RefundCase } from '#shared/domain/money/refund-due'
import { refundRules } from '#shared/domain/money/refund-rules'

// Prices, table and the worked example: handbook 5.4. Dates counted on a wall calendar of 2026: Cinder starts 21 September.
const cinder: RefundCase = {
  paidDepositMinor: 35_000, paidBalanceMinor: 210_000, depositPaidOn: '2026-03-02', startsOn: '2026-09-21', cancelledOn: '2026-07-27',
  cause: 'student', moveUsed: false, placeFilled: false, weeks: 13, weeksUsed: 0,
}
const given = (change: Partial<RefundCase>) => refundDue({ ...cinder, ...change })

describe('the days of the refund table', () => {
  it.each([
    ['57', '2026-07-26', '56-days', 32_500, 210_000],
    ['56', '2026-07-27', '56-days', 32_500, 210_000],
    ['55', '2026-07-28', '28-days', 0, 210_000],
    ['29', '2026-08-23', '28-days', 0, 210_000],
    ['28', '2026-08-24', '28-days', 0, 210_000],
    ['27', '2026-08-25', '7-days', 0, 105_000],
    ['8', '2026-09-13', '7-days', 0, 105_000],
    ['7', '2026-09-14', '7-days', 0, 105_000],
    ['6', '2026-09-15', 'under-7-days', 0, 0],
    ['1', '2026-09-20', 'under-7-days', 0, 0],
    ['0', '2026-09-21', 'under-7-days', 0, 0],
    ['-1', '2026-09-22', 'under-7-days', 0, 0],
    ['-60', '2026-11-20', 'under-7-days', 0, 0],
  ])('%s days before the start, on %s, follows %s', (_days, cancelledOn, rule, depositBackMinor, balanceBackMinor) => {
    expect(given({ cancelledOn })).toMatchObject({ rule, depositBackMinor, balanceBackMinor })
  })

  it('takes no part of a day from a change to summer time', () => {
    // The clocks go forward on 29 March 2026; 30 March is 56 days before 25 May.
    expect(given({ startsOn: '2026-05-25', cancelledOn: '2026-03-30' }).rule).toBe('56-days')
    expect(given({ startsOn: '2026-05-25', cancelledOn: '2026-03-31' }).rule).toBe('28-days')
  })
})

describe('the fourteen days after paying', () => {
  it('gives all back on day 14, and no longer on day 15', () => {
    expect(given({ depositPaidOn: '2026-03-02', cancelledOn: '2026-03-16' })).toMatchObject({ rule: 'within-14-days', depositBackMinor: 35_000, balanceBackMinor: 210_000 })
    expect(given({ depositPaidOn: '2026-03-02', cancelledOn: '2026-03-17' })).toMatchObject({ rule: '56-days', depositBackMinor: 32_500 })
  })

  it('wins over every later row while the course has not begun, as the first row does', () => {
    // Paid 28 August, cancelled 11 September: day 14 after paying, 10 days before the start.
    expect(given({ depositPaidOn: '2026-08-28', cancelledOn: '2026-09-11' })).toMatchObject({ rule: 'within-14-days', depositBackMinor: 35_000, balanceBackMinor: 210_000 })
    expect(given({ depositPaidOn: '2026-08-28', cancelledOn: '2026-09-12' })).toMatchObject({ rule: '7-days', depositBackMinor: 0, balanceBackMinor: 105_000 })
    expect(given({ depositPaidOn: '2026-09-20', cancelledOn: '2026-09-20' })).toMatchObject({ rule: 'within-14-days', depositBackMinor: 35_000 })
  })

  it('ends with the first day of the course', () => {
    expect(given({ depositPaidOn: '2026-09-10', cancelledOn: '2026-09-20' }).rule).toBe('within-14-days')
    expect(given({ depositPaidOn: '2026-09-10', cancelledOn: '2026-09-21' }).rule).toBe('under-7-days')
  })
})

it('gives Agnes nothing back and the move, as the handbook works it', () => {
  expect(refundDue({ paidDepositMinor: 35_000, paidBalanceMinor: 0, depositPaidOn: '2025-06-01', startsOn: '2025-09-22', cancelledOn: '2025-08-13', cause: 'student', moveUsed: false, placeFilled: false, weeks: 13, weeksUsed: 0 })).toEqual({
    rule: '28-days',
    wording: '28 to 55 days before the start: deposit kept, or moved once to another cohort; balance all back. Where local consumer law gives more, the law applies.',
    sum: '350.00 paid - 350.00 kept = 0.00 back',
    depositBackMinor: 0,
    balanceBackMinor: 0,
    mayMove: true,
  })
})

describe('what is back, to the penny', () => {
  it('keeps 25.00 of a deposit, and of a smaller one no more than was paid', () => {
    expect(given({ paidBalanceMinor: 0 })).toMatchObject({ depositBackMinor: 32_500, sum: '350.00 paid - 25.00 kept = 325.00 back' })
    expect(given({ paidDepositMinor: 2000, paidBalanceMinor: 0 })).toMatchObject({ depositBackMinor: 0, sum: '20.00 paid - 20.00 kept = 0.00 back' })
  })

  it('gives the odd penny of half a balance to the student', () => {
    expect(given({ cancelledOn: '2026-09-01', paidBalanceMinor: 210_001 })).toMatchObject({
      balanceBackMinor: 105_001, sum: 'Deposit 350.00 paid - 350.00 kept = 0.00 back; balance 2,100.01 paid - 1,050.00 kept = 1,050.01 back; together 1,050.01 back',
    })
    expect(given({ cancelledOn: '2026-09-01', paidBalanceMinor: 1 }).balanceBackMinor).toBe(1)
  })

  it('gives unused weeks less 20 % after unsafe work', () => {
    // Worked by hand: 2,100.00 x 6 / 13 = 969.2307..; x 0.8 = 775.3846.., so 775.39 with the broken penny.
    expect(given({ cause: 'unsafe-work', cancelledOn: '2026-11-05', weeksUsed: 7 })).toMatchObject({
      rule: 'unsafe-work', depositBackMinor: 0, balanceBackMinor: 77_539, mayMove: false,
      sum: 'Deposit 350.00 paid - 350.00 kept = 0.00 back; balance 2,100.00 paid x 6 of 13 weeks unused, less 20 % = 775.39 back; together 775.39 back',
    })
    expect(given({ cause: 'unsafe-work', weeksUsed: 13 }).balanceBackMinor).toBe(0)
    // 2,600.00 over 13 weeks is 200.00 a week, 160.00 of it back: exact, so no penny more.
    expect(given({ cause: 'unsafe-work', paidBalanceMinor: 260_000, weeksUsed: 12 }).balanceBackMinor).toBe(16_000)
  })

  it('gives all back when the school cancels, also after the start', () => {
    expect(given({ cause: 'school', cancelledOn: '2026-10-01' })).toMatchObject({ rule: 'school', depositBackMinor: 35_000, balanceBackMinor: 210_000, sum: 'Deposit 350.00 paid - 0.00 kept = 350.00 back; balance 2,100.00 paid - 0.00 kept = 2,100.00 back; together 2,450.00 back' })
  })

  it('never gives back more than was paid, nor less than nothing, whatever the day and the cause', () => {
    for (const cause of ['student', 'school', 'illness', 'unsafe-work'] as const) {
      for (let day = 1; day <= 30; day += 1) {
        const cancelledOn = `2026-09-${String(day).padStart(2, '0')}`
        for (const [paidDepositMinor, paidBalanceMinor] of [[0, 0], [1, 1], [2499, 3], [35_000, 209_999]] as const) {
          const due = given({ cause, cancelledOn, paidDepositMinor, paidBalanceMinor, weeksUsed: day % 14 })
          expect(due.depositBackMinor).toBeGreaterThanOrEqual(0)
          expect(due.depositBackMinor).toBeLessThanOrEqual(paidDepositMinor)
          expect(due.balanceBackMinor).toBeGreaterThanOrEqual(0)
          expect(due.balanceBackMinor).toBeLessThanOrEqual(paidBalanceMinor)
        }
      }
    }
  })

  it('says so when nothing was paid', () => {
    expect(given({ paidDepositMinor: 0, paidBalanceMinor: 0, depositPaidOn: null }).sum).toBe('Nothing was paid, so nothing goes back')
    expect(given({ paidDepositMinor: 0, depositPaidOn: null, cancelledOn: '2026-09-01' }).sum).toBe('Balance 2,100.00 paid - 1,050.00 kept = 1,050.00 back')
  })
})

describe('moving instead', () => {
  it.each([
    ['28 to 55 days before', { cancelledOn: '2026-08-01' }, true],
    ['there, but moved once already', { cancelledOn: '2026-08-01', moveUsed: true }, false],
    ['7 to 27 days before, nobody taking the place', { cancelledOn: '2026-09-01' }, false],
    ['there, the place filled', { cancelledOn: '2026-09-01', placeFilled: true }, true],
    ['there, the place filled, but moved once already', { cancelledOn: '2026-09-01', placeFilled: true, moveUsed: true }, false],
    ['under 7 days before', { cancelledOn: '2026-09-16', placeFilled: true }, false],
    ['under 7 days before, ill or bereaved', { cancelledOn: '2026-09-16', cause: 'illness' }, true],
    ['after the start, ill or bereaved', { cancelledOn: '2026-10-16', cause: 'illness' }, true],
    ['after the start, ill or bereaved, but moved once already', { cancelledOn: '2026-10-16', cause: 'illness', moveUsed: true }, false],
    ['56 days before', {}, true],
    ['when the school cancels, even after a move', { cause: 'school', moveUsed: true }, true],
    ['after unsafe work', { cause: 'unsafe-work', cancelledOn: '2026-11-05', weeksUsed: 7 }, false],
  ] as const)('%s', (_when, change, may) => {
    expect(given(change).mayMove).toBe(may)
  })

  it('gives an ill student under 7 days nothing back but the move', () => {
    expect(given({ cancelledOn: '2026-09-16', cause: 'illness' })).toMatchObject({ rule: 'under-7-days', depositBackMinor: 0, balanceBackMinor: 0 })
  })
})

it('says with every rule that the law may give more', () => {
  const causes = [['student', '2026-03-05'], ['student', '2026-05-01'], ['student', '2026-08-01'], ['student', '2026-09-01'], ['student', '2026-09-20'], ['school', '2026-09-20'], ['unsafe-work', '2026-10-20']] as const
  const all = causes.map(([cause, cancelledOn]) => given({ cause, cancelledOn }))
  expect(all.map(one => one.rule)).toEqual(refundRules.map(one => one.code))
  for (const { wording } of all) expect(wording).toMatch(/\. Where local consumer law gives more, the law applies\.$/)
})

describe('what cannot be reckoned', () => {
  it.each([
    ['an amount that is not whole', { paidDepositMinor: 350.5 }],
    ['an amount below zero', { paidBalanceMinor: -1 }],
    ['an amount that is no number', { paidBalanceMinor: Number.NaN }],
    ['a day that is none', { cancelledOn: '2026-06-31' }],
    ['an instant instead of a day', { startsOn: '2026-09-21T00:00:00Z' }],
    ['more weeks used than there are', { weeksUsed: 14 }],
    ['a course of no weeks', { weeks: 0 }],
  ])('%s is refused', (_what, change) => {
    expect(() => given(change)).toThrow(RangeError)
  })
})
