import AxeBuilder from '@axe-core/playwright'
import type { Page } from '@playwright/test'
import type { PlaceRow } from '#shared/contract/places'
import type { BenchView, FeedbackView, HeadSummary, Page as PageOf, PersonView, QueueItem, SubmissionView } from '#shared/contract/views'
import { read } from './calls'
import { expect, ready, signIn, test } from './walk'

// The demo as `npm start` seeds it. Everything here only looks.
const rules = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']

/** What axe finds serious or critical on the page as it stands, one line each. */
async function findings(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).withTags(rules).analyze()
  return violations.filter(one => one.impact === 'serious' || one.impact === 'critical').map(one => `${one.id} (${one.impact}): ${one.nodes.slice(0, 3).map(node => node.target.join(' ')).join('; ')}`)
}

/** Goes through pages and tells everything that was found at the end: on a phone in the dark theme, on a wide screen in the light one. Colours are the same at every width. */
async function look(page: Page, paths: readonly string[]): Promise<void> {
  const phone = (page.viewportSize()?.width ?? 0) < 600
  const found: string[] = []
  for (const path of paths) {
    const answer = await page.goto(path)
    if ((answer?.status() ?? 0) >= 400) found.push(`${path}: answered ${answer?.status()}`)
    await ready(page)
    await expect(page.locator('main [aria-busy=true]')).toHaveCount(0)
    await expect(page.getByRole('heading', { level: 1 }).or(page.getByRole('heading', { level: 2 })).first()).toBeVisible()
    const wide = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
    if (wide > 0) found.push(`${path}: ${wide} px wider than the screen`)
    const colorScheme = phone ? 'dark' : 'light'
    await page.emulateMedia({ colorScheme })
    found.push(...(await findings(page)).map(line => `${path}, ${colorScheme}: ${line}`))
  }
  expect(found).toEqual([])
}

test.describe.configure({ timeout: 120_000 })

test('strangers\' pages serve everybody', async ({ page }) => {
  await look(page, ['/login', '/forgot', '/set-password?token=aaaaaaaaaaaaaaaaaaaaaaaa', '/courses', '/cohorts/CIN-26'])
})

test('a student\'s pages serve everybody', async ({ page }) => {
  await signIn(page, 'imre')
  const bench = await read<BenchView>(page, '/api/bench')
  const feedback = await read<PageOf<FeedbackView>>(page, '/api/feedback')
  const stages = bench.head?.stages ?? []
  const drafts = stages.flatMap(stage => stage.submission ? [stage.submission.id] : [])
  const submissions = await Promise.all(drafts.map(id => read<SubmissionView>(page, `/api/submissions/${id}`)))
  const withSheet = submissions.find(one => one.sheets.length > 0)
  const draft = submissions.find(one => one.state === 'draft')
  expect([withSheet, draft, feedback.items[0]].every(Boolean), 'the story has a sheet, a draft and feedback').toBe(true)
  await look(page, [
    '/bench', '/route-card', `/heads/${bench.head?.id}`, `/proof/${draft?.id}`, `/proof/${draft?.id}/read`, `/proof/${withSheet?.id}`, `/proof/${withSheet?.id}/sheets/${withSheet?.sheets[0]?.id}`,
    '/feedback', `/feedback/${feedback.items[0]?.submissionId}`, '/lessons', '/lessons/bowl', '/safety-form', '/account', '/forbidden',
  ])
})

test('an instructor\'s pages serve everybody', async ({ page }) => {
  await signIn(page, 'hanne')
  const queue = await read<PageOf<QueueItem>>(page, '/api/review-queue')
  const heads = await read<PageOf<HeadSummary>>(page, '/api/heads')
  expect(queue.items.length, 'somebody waits').toBeGreaterThan(0)
  await look(page, ['/review', ...queue.items.slice(0, 2).map(item => `/review/${item.id}`), '/shop-board', `/heads/${heads.items[0]?.id}`, '/rubrics', '/lessons', '/lessons/dummy-valves/edit', '/media', '/records'])
})

test('an alumna\'s pages serve everybody', async ({ page }) => {
  await signIn(page, 'freya')
  await look(page, ['/shelf', '/my-record', '/lessons/dummy-valves'])
})

test('the office\'s and the safety officer\'s pages serve everybody', async ({ page }) => {
  await signIn(page, 'corin')
  const [person] = (await read<PageOf<PersonView>>(page, '/api/people?search=imre')).items
  const [place] = (await read<PageOf<PlaceRow>>(page, '/api/places?search=agnes')).items
  expect([person, place].every(Boolean), 'the story has Imre and Agnes').toBe(true)
  await look(page, ['/places', `/places/${place?.id}`, '/places/cohorts', '/places/cohorts/ALD-26/list', '/money-book', '/people', `/people/${person?.id}`, '/records', '/records/mail', '/account'])
  await signIn(page, 'ingrid')
  await look(page, ['/clearances', '/shop-board', '/records'])
})

test.describe('an address with nothing behind it', () => {
  test.use({ consoleMaySay: /status of 404/ })
  test('says so in words', async ({ page }) => {
    await signIn(page, 'imre')
    await page.goto('/no-such-page')
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible()
    expect(await findings(page)).toEqual([])
  })
})
