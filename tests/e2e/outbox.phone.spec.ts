import type { BenchView, SubmissionView } from '#shared/contract/views'
import { must, read } from './calls'
import { firstBowls } from './instants'
import { takePicture } from './picture'
import { studentsAt } from './people'
import { expect, ready, signIn, test } from './walk'
import type { Page } from '@playwright/test'

// Students about to show a first bowl, each in a test of their own; what the network and the session do to them is meant.
test.use({ until: firstBowls, story: 'outbox', consoleMaySay: /net::ERR_|status of 40[14]/ })

/** Opens the proof of the nth student's first bowl. */
async function beginBowl(page: Page, another: (size: 'desktop') => Promise<Page>, nth: number): Promise<{ name: string, id: string }> {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const name = (await studentsAt(hanne, 70))[nth] ?? ''
  await signIn(page, name)
  const { head } = await read<BenchView>(page, '/api/bench')
  const { id } = await must<{ id: string }>(page, `/api/heads/${head?.id}/stages/70/submissions`)
  return { name, id }
}
const photosOf = async (page: Page, id: string) => (await read<SubmissionView>(page, `/api/submissions/${id}`)).photos
const waiting = (page: Page) => page.locator('figcaption').getByText('Waiting for signal')

test('sends a photo once, however often the network went away', async ({ page, another, school }) => {
  const { id } = await beginBowl(page, another, 0)
  await page.goto(`/proof/${id}`)
  await ready(page)
  const tiles = page.locator('input[type=file][accept="image/*"]')
  const wanted = await tiles.count()

  await test.step('the line to storage goes dead in the middle of the file, again and again', async () => {
    school.s3.faults.cutNext = 1000
    await tiles.first().setInputFiles(await takePicture(1600))
    await expect(waiting(page).first()).toBeVisible()
    await page.reload()
    await ready(page)
    await expect(waiting(page)).toBeVisible()
    await expect(tiles).toHaveCount(wanted - 1)
    expect(await photosOf(page, id)).toEqual([])
  })
  await test.step('there is no network at all, and then there is', async () => {
    await page.context().setOffline(true)
    await tiles.first().setInputFiles(await takePicture(800))
    await expect(waiting(page)).toHaveCount(2)
    school.s3.faults.cutNext = 0
    await page.context().setOffline(false)
  })
  await test.step('both arrive, each once', async () => {
    await expect(waiting(page)).toHaveCount(0, { timeout: 20_000 })
    await expect.poll(async () => (await photosOf(page, id)).length, { timeout: 20_000 }).toBe(2)
    await page.reload()
    await ready(page)
    await expect(tiles).toHaveCount(wanted - 2)
    await expect(page.getByText(/kept on this device/)).toHaveCount(0)
    expect((await photosOf(page, id)).length).toBe(2)
    await expect.poll(async () => (await photosOf(page, id)).every(photo => photo.thumbUrl), { timeout: 20_000 }).toBe(true)
  })
})

test('keeps a figure on the pad through a reload, and sends it when it is read', async ({ page, another }) => {
  const { id } = await beginBowl(page, another, 1)
  await page.goto(`/proof/${id}`)
  await ready(page)
  await page.getByRole('link', { name: 'Read', exact: true }).click()
  await expect(page.getByRole('heading', { level: 1, name: 'Reading pad' })).toBeVisible()
  await ready(page)
  const spot = page.getByRole('navigation', { name: 'Spots to read' }).getByRole('button', { name: /Seat land.*1:30/ })
  await spot.click()
  const keys = page.getByRole('group', { name: /^Keys for/ })
  const press = async (figures: string) => {
    for (const key of figures) await keys.locator(`[data-key="${key}"]`).tap()
  }
  await press('1.64')
  await page.getByRole('button', { name: 'One more at this spot' }).tap()
  await press('1.6')
  // The band, the value and its doubt, before anything is sent.
  await expect(page.getByRole('img', { name: /plus or minus.*Accepted from 1\.52/ }).first()).toBeVisible()

  await page.reload()
  await ready(page)
  const display = page.getByRole('textbox', { name: 'Figure as the instrument shows it' })
  await expect(display).toHaveValue('1.6')
  await expect(page.getByRole('button', { name: 'Take 1.64 off' })).toBeVisible()
  await expect(spot).toHaveAttribute('aria-current', 'true')
  expect((await read<SubmissionView>(page, `/api/submissions/${id}`)).readings).toEqual([])

  await press('6')
  await page.getByRole('button', { name: 'Read, 2 repeats' }).tap()
  await expect(spot).toContainText('read')
  const [reading] = (await read<SubmissionView>(page, `/api/submissions/${id}`)).readings
  expect([reading?.values, reading?.spot, reading?.unit]).toEqual([['1.64', '1.66'], '1:30', 'mm'])
  await page.reload()
  await ready(page)
  await expect(display).toHaveValue('')
})

test('loses nothing when the session ends, and shows none of it to somebody else', async ({ page, another }) => {
  const { name, id } = await beginBowl(page, another, 2)
  await page.goto(`/proof/${id}/read`)
  await ready(page)
  const display = page.getByRole('textbox', { name: 'Figure as the instrument shows it' })
  await must(page, '/api/me/sign-out-everywhere')
  for (const figure of ['1.61', '1.62']) {
    await display.pressSequentially(figure)
    await page.getByRole('button', { name: 'Read', exact: true }).tap()
    await expect(display).toHaveValue('')
  }
  await expect(page.getByText(/Your sign-in has ended. 2 things kept on this device/)).toBeVisible()
  await page.getByRole('status').getByRole('link', { name: 'sign in' }).tap()

  const enter = async (person: string) => {
    await expect(page).toHaveURL(/\/login/)
    await ready(page)
    await page.getByLabel('E-mail').fill(`${person.toLowerCase()}@sallowbeck.example`)
    await page.getByLabel('Password').fill('slow-hands-true-numbers')
    await page.getByRole('button', { name: 'Sign in' }).tap()
    await expect(page).not.toHaveURL(/\/login/)
    await ready(page)
  }
  await test.step('another student takes up the tablet', async () => {
    await enter('imre')
    await page.goto('/bench')
    await ready(page)
    await expect(page.getByText('Next stroke, op 100')).toBeVisible()
    await expect(page.getByText(/kept on this device|sending/i)).toHaveCount(0)
    await page.getByText('Imre Tallowin').tap()
    await page.getByRole('button', { name: 'Sign out' }).tap()
  })
  await test.step('and the first comes back', async () => {
    await enter(name)
    await page.goto(`/proof/${id}`)
    await ready(page)
    await expect.poll(async () => (await read<SubmissionView>(page, `/api/submissions/${id}`)).readings.flatMap(reading => reading.values).sort(), { timeout: 20_000 }).toEqual(['1.61', '1.62'])
    await expect(page.getByText(/kept on this device/)).toHaveCount(0)
  })
})
