import type { Locator, Page } from '@playwright/test'
import type { BenchView, HeadSummary, Page as PageOf, SubmissionView } from '#shared/contract/views'
import { bringBowl } from './bowl'
import { must, read } from './calls'
import { firstBowls } from './instants'
import { scored, studentsAt } from './people'
import { criterion } from './review-page'
import { expect, ready, signIn, test } from './walk'

// No test here touches a mouse.
test.use({ until: firstBowls, story: 'keyboard' })

/** Tabs on from where the keyboard is until a thing has the focus: it can be reached, and in the page's order. */
async function tabTo(page: Page, to: Locator, key: 'Tab' | 'Shift+Tab' = 'Tab'): Promise<void> {
  for (let presses = 0; presses < 250; presses++) {
    if (await to.evaluate(element => element === document.activeElement).catch(() => false)) return
    await page.keyboard.press(key)
  }
  throw new Error(`${String(to)} was not reached in 250 presses of ${key}`)
}

test('types readings one after the other', async ({ page, another }) => {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const [name = ''] = await studentsAt(hanne, 70)
  await signIn(page, name)
  const { head } = await read<BenchView>(page, '/api/bench')
  const { id } = await must<{ id: string }>(page, `/api/heads/${head?.id}/stages/70/submissions`)
  await page.goto(`/proof/${id}/read`)
  await ready(page)
  // The page hears late that the server has a reading: the spot just read must not come up again meanwhile.
  await page.route(url => url.pathname === `/api/submissions/${id}`, async (route) => {
    await new Promise(resolve => setTimeout(resolve, 600))
    await route.continue()
  })
  const display = page.getByRole('textbox', { name: 'Figure as the instrument shows it' })
  const spots = page.getByRole('navigation', { name: 'Spots to read' })
  await tabTo(page, display)
  const there = async () => (await read<SubmissionView>(page, `/api/submissions/${id}`)).readings.flatMap(one => one.values)
  const figures = ['1.65', '1.66', '1.64']
  for (const [nth, figure] of figures.entries()) {
    await page.keyboard.type(figure)
    await expect(display).toHaveValue(figure)
    await page.keyboard.press('Enter')
    // The next spot is up, and the keyboard is where the next figure goes.
    await expect(display).toHaveValue('')
    await expect(display).toBeFocused()
    await expect.poll(there).toHaveLength(nth + 1)
  }
  expect((await there()).sort()).toEqual([...figures].sort())
  await expect(spots.getByText('read', { exact: true })).toHaveCount(3)
  await page.keyboard.type('1.x6')
  await expect(display).toHaveValue('1.6')
  await page.keyboard.press('Backspace')
  await expect(display).toHaveValue('1.')
})

test('reads a curve out with the arrow keys', async ({ page }) => {
  await signIn(page, 'imre')
  const { items } = await read<PageOf<HeadSummary>>(page, '/api/heads')
  await page.goto(`/heads/${items.find(one => one.number === 'DNK-0147')?.id}`)
  await ready(page)
  await tabTo(page, page.getByRole('tab', { name: 'By spot' }))
  await page.keyboard.press('ArrowRight')
  await expect(page.getByRole('tab', { name: 'Curve room' })).toBeFocused()
  const plot = page.getByRole('application').first()
  await tabTo(page, plot)
  const readOut = page.getByRole('status').filter({ hasText: /cfm|arrow keys/ }).first()
  await page.keyboard.press('Home')
  // Lifts of sheet 01: 0.050 to 0.450 in.
  await expect(readOut).toContainText('0.050 in')
  await page.keyboard.press('ArrowRight')
  await expect(readOut).toContainText('0.100 in')
  await expect(readOut).toContainText(/\d+\.\d ± \d+\.\d cfm/)
  await page.keyboard.press('End')
  await expect(readOut).toContainText('0.450 in')
  await page.keyboard.press('ArrowLeft')
  await expect(readOut).toContainText('0.400 in')
  await page.keyboard.press('Escape')
  await expect(readOut).toContainText('arrow keys')
})

test('reviews from the queue to the release', async ({ page, another }) => {
  const student = await another('phone')
  await signIn(page, 'hanne')
  const name = (await studentsAt(page, 70))[1] ?? ''
  await signIn(student, name)
  const draft = await bringBowl(student)
  await must(student, `/api/submissions/${draft.id}/ask`)
  await scored(student, draft.id)

  await page.goto('/review')
  await ready(page)
  await tabTo(page, page.getByRole('link', { name: new RegExp(draft.head.student.name) }))
  await page.keyboard.press('Enter')
  await expect(page.getByRole('heading', { level: 1 })).toContainText(draft.head.student.name)
  const release = page.getByRole('button', { name: 'Release Hold 4' })
  await expect(release).toBeVisible()

  const line = criterion(page, 'W-08')
  await tabTo(page, line.getByRole('button', { name: 'Give a state' }))
  await page.keyboard.press('Enter')
  await expect(line.getByRole('radio', { name: 'Accept' })).toBeFocused()
  await page.keyboard.press('Space')
  await page.keyboard.press('Tab')
  await page.keyboard.type('One port only, seen at the bench.')
  await page.keyboard.press('Enter')
  await expect(line.getByText('yours: One port only, seen at the bench.')).toBeVisible()
  await expect(line.getByRole('button', { name: 'Give a state' })).toBeFocused()

  await tabTo(page, page.getByRole('button', { name: 'Pin a spot' }))
  await page.keyboard.press('Enter')
  await page.keyboard.press('Shift+Tab')
  await tabTo(page, page.getByRole('heading', { name: 'Photos' }).locator('xpath=ancestor::section[1]').getByRole('group').first(), 'Shift+Tab')
  await page.keyboard.press('Enter')
  await tabTo(page, page.getByLabel('Words for pin 1'))
  await page.keyboard.type('Keep the ball under this edge.')
  await tabTo(page, page.getByLabel('Your words'))
  await page.keyboard.press('Control+A')
  await page.keyboard.type('Good bowl. Copy it.')
  await tabTo(page, release)
  await page.keyboard.press('Enter')
  await expect(page.getByText(/Decided\. /)).toBeVisible()
})
