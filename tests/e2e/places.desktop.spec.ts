import type { CohortRow, PlaceRow } from '#shared/contract/places'
import type { Page as PageOf } from '#shared/contract/views'
import { must, read } from './calls'
import { asItCame, linkIn, mailTo } from './mail'
import { expect, ready, signIn, test } from './walk'

// The demo as `npm start` seeds it: Cinder is open. The office makes it a cohort with one place left.
test.use({ story: 'places', consoleMaySay: /status of 40[49]/ })

const first = { name: 'Tamsin Quarrelow', email: 'tamsin@weirlane.example' }
const second = { name: 'Bram Ottersedge', email: 'bram@weirlane.example' }

test('the last place: asked for, declined, paid, cancelled by the rule, and offered to the next', async ({ page, another, school }) => {
  test.setTimeout(180_000)
  const corin = await another('desktop')
  await signIn(corin, 'corin')
  const cinder = (await read<{ items: CohortRow[] }>(corin, '/api/cohorts')).items.find(one => one.code === 'CIN-26')
  expect(cinder?.open).toBe(true)
  await must(corin, '/api/cohorts/CIN-26', { places: (cinder?.taken ?? 0) + 1 })

  await test.step('a visitor finds the course and asks', async () => {
    await page.goto('/courses')
    await page.getByRole('link', { name: /Cinder/ }).first().click()
    await expect(page).toHaveURL(/\/cohorts\/CIN-26/)
    await ready(page)
    await expect(page.getByText('What comes back if you cancel')).toBeVisible()
    await page.getByLabel('Name').fill(first.name)
    await page.getByLabel('E-mail').fill(first.email)
    await page.getByRole('button', { name: 'Ask for a place' }).click()
    await expect(page.getByText('Nothing is held yet.')).toBeVisible()
  })

  await test.step('opens the mailed link, is declined once, and pays', async () => {
    await page.goto(linkIn(await mailTo(school, first.email, /./), '/place/'))
    await expect(page.getByText('A bench place is held for you')).toBeVisible()
    await ready(page)
    await page.getByRole('button', { name: /^Pay £350\.00 deposit/ }).click()
    await page.getByRole('button', { name: 'Card is declined' }).click()
    await expect(page.getByRole('alert')).toBeVisible()
    await page.getByRole('link', { name: 'Back without paying' }).click()
    await expect(page.getByText('Nothing was taken from your card.')).toBeVisible()
    await ready(page)
    await page.getByRole('button', { name: /£350\.00 deposit/ }).click()
    await page.getByRole('button', { name: 'Pay £350.00' }).click()
    await expect(page.getByText(/Thank you\. £350\.00 is paid\./)).toBeVisible({ timeout: 20_000 })
  })

  await test.step('gets the receipt by e-mail, and an account', async () => {
    const booked = await mailTo(school, first.email, /^Your place in Cinder is booked$/)
    expect(await asItCame(school, booked)).toMatch(/application\/pdf/)
    const invitation = await mailTo(school, first.email, /sign-in/i)
    await page.goto(linkIn(invitation, '/set-password'))
    await ready(page)
    await page.getByLabel('New password').fill('ten letters and more')
    await page.locator('form').getByRole('button').last().click()
    await page.getByRole('status').getByRole('link', { name: 'Sign in' }).click()
    await ready(page)
    await page.getByLabel('E-mail').fill(first.email)
    await page.getByLabel('Password').fill('ten letters and more')
    await page.getByRole('button', { name: 'Sign in' }).click()
    await page.waitForURL(url => url.pathname !== '/login')
    const me = await read<{ places: { code: string, state: string }[] }>(page, '/api/me')
    expect(me.places).toMatchObject([{ code: 'CIN-26', state: 'deposit-paid' }])
  })

  const visitor = await another('phone')
  await test.step('a second visitor lands on the waiting list', async () => {
    await visitor.goto('/cohorts/CIN-26')
    await ready(visitor)
    await visitor.getByLabel('Name').fill(second.name)
    await visitor.getByLabel('E-mail').fill(second.email)
    await visitor.getByRole('button', { name: 'Ask for a turn' }).click()
    await expect(visitor.getByText('Look in your mail')).toBeVisible()
    await visitor.goto(linkIn(await mailTo(school, second.email, /./), '/place/'))
    await expect(visitor.getByText('You are next')).toBeVisible()
  })

  await test.step('the admin sees rule and sum, and cancels', async () => {
    await corin.goto('/places?search=tamsin')
    await ready(corin)
    await corin.getByRole('link', { name: first.name }).click()
    await expect(corin.getByRole('heading', { level: 1 })).toContainText(first.name)
    // Within fourteen days of paying, before the start (handbook 5.4): everything comes back.
    await expect(corin.getByText(/14 days/).first()).toBeVisible()
    await expect(corin.getByText('Back', { exact: true }).locator('xpath=following-sibling::*')).toHaveText('£350.00')
    await ready(corin)
    await corin.getByRole('button', { name: 'Cancel this place' }).click()
    await corin.getByRole('dialog').getByRole('button', { name: 'Cancel, £350.00 back' }).click()
    await expect(corin.getByText(/cancelled/i).first()).toBeVisible()
    const refund = await mailTo(school, first.email, /^Your refund of £350\.00$/)
    expect(refund.text).toContain('350.00')
    const lines = await read<{ items: { kind: string, amount: { minor: number } }[] }>(corin, '/api/ledger?search=tamsin')
    expect(lines.items.map(line => [line.kind, line.amount.minor]).sort()).toEqual([['card', 35_000], ['card-refund', -35_000]])
  })

  await test.step('the second visitor is offered the place', async () => {
    const offer = await mailTo(school, second.email, /^A place has come free$/)
    await visitor.goto(linkIn(offer, '/place/'))
    await expect(visitor.getByText('A bench place is held for you')).toBeVisible()
    const held = await read<PageOf<PlaceRow>>(corin, '/api/places?search=bram')
    expect(held.items.map(place => place.state)).toEqual(['offered'])
  })
})
