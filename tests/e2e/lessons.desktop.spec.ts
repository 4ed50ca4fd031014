import { fileURLToPath } from 'node:url'
import type { LessonView, SearchHit } from '#shared/contract/lessons'
import type { MediaView } from '#shared/contract/media'
import type { Page as PageOf } from '#shared/contract/views'
import { read } from './calls'
import { mailTo } from './mail'
import { expect, ready, signIn, test } from './walk'

// The demo as `npm start` seeds it: Imre is mid-head, Freya finished.
test.use({ story: 'lessons', consoleMaySay: /status of (404|409|422)/ })

const film = fileURLToPath(new URL('../../content/media/ball-touch.mp4', import.meta.url))
const lesson = 'bowl'

test('an instructor writes a lesson with every block and publishes; a student mid-head keeps the old version', async ({ page, another, school }) => {
  test.setTimeout(180_000)
  await signIn(page, 'hanne')
  const imre = await another('phone')
  await signIn(imre, 'imre')
  const before = await read<LessonView>(imre, `/api/lessons/${lesson}`)
  const text = page.getByRole('textbox', { name: 'Text of the lesson' })
  const tool = (name: string) => page.getByRole('toolbar').getByRole('button', { name, exact: true })

  await test.step('writes every block', async () => {
    await page.goto(`/lessons/${lesson}/edit`)
    await ready(page)
    await text.click()
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Heading 2 (H2)').click()
    await page.keyboard.type('After the first port')
    await page.keyboard.press('Enter')
    await page.keyboard.type('Wipe, look, wait.')
    await page.keyboard.press('Enter')
    await tool('• List').click()
    await page.keyboard.type('dye first')
    await page.keyboard.press('Enter')
    await page.keyboard.press('Enter')
    await tool('Link').click()
    await page.getByRole('dialog').getByRole('textbox').fill('/lessons/chamber')
    await page.getByRole('dialog').locator('button[type=submit]').click()
    await page.keyboard.press('End')
    await page.keyboard.press('Enter')
    await tool('Table').click()
    await page.keyboard.type('Spot')
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Caution').click()
    await page.keyboard.type('Let the bur stop before you measure.')
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Steps').click()
    await page.keyboard.type('Take ten strokes at 6 o’clock.')
    await tool('Cannot be undone').click()
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Limit').click()
    await page.getByRole('dialog').getByLabel(/Find by title/).fill('seat land')
    await page.getByRole('dialog').getByRole('radio').first().check()
    await page.getByRole('dialog').getByRole('button', { name: 'Put it in' }).click()
    await expect(page.getByText('Saved', { exact: false }).first()).toBeVisible({ timeout: 15_000 })
  })

  await test.step('sends a picture, without alt text it cannot be published', async () => {
    await text.click()
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Picture').click()
    const dialog = page.getByRole('dialog')
    await dialog.locator('input[type=file]').setInputFiles(fileURLToPath(new URL('../../content/photos/chamber-01.jpg', import.meta.url)))
    await dialog.getByRole('button', { name: 'Send', exact: true }).click()
    await expect(dialog.getByRole('radio', { checked: true })).toBeVisible({ timeout: 30_000 })
    await dialog.getByRole('button', { name: 'Put it in' }).click()
    await page.getByRole('button', { name: 'Publish', exact: true }).click()
    await expect(page.getByRole('dialog').getByRole('alert')).toContainText('missing')
    await page.getByRole('dialog').getByRole('button', { name: 'Not now' }).click()
    await page.getByLabel('What it shows, for somebody who cannot see it').last().fill('A chamber from the deck, the scale card beside it')
  })

  await test.step('sends a film, names its piece, gives it captions', async () => {
    await text.click()
    await page.keyboard.press('ControlOrMeta+End')
    await page.keyboard.press('Enter')
    await tool('Clip').click()
    const dialog = page.getByRole('dialog')
    await dialog.locator('input[type=file]').setInputFiles(film)
    await dialog.getByLabel('Title').first().fill('Where the ball touches, again')
    await dialog.getByRole('button', { name: 'Send', exact: true }).click()
    await expect(dialog.getByRole('radio', { checked: true })).toBeVisible({ timeout: 30_000 })
    await dialog.getByRole('button', { name: 'Put it in' }).click()
    const clip = page.getByRole('group', { name: 'Clip' }).last()
    await clip.getByLabel('To').fill('0:06')
    await clip.getByLabel(/Caption, also printed/).fill('The widest part of the ball cuts.')
    const films = page.getByRole('heading', { name: 'Films in this lesson' }).locator('xpath=ancestor::section[1]')
    await films.locator('summary', { hasText: 'again' }).click()
    const form = films.locator('details[open]')
    await form.getByLabel('Or its text').fill('WEBVTT\n\n00:01.000 --> 00:00.500\nBackwards\n')
    await form.getByRole('button', { name: 'Save captions' }).click()
    await expect(form.getByRole('alert')).toContainText(/line \d/)
    await form.getByLabel('Or its text').fill('WEBVTT\n\n00:01.000 --> 00:03.000\nNever let the ball climb over the pintle edge.\n')
    await form.getByRole('button', { name: 'Save captions' }).click()
    await expect(films.locator('summary', { hasText: 'again' })).toContainText('1 captions')
  })

  await test.step('publishes', async () => {
    await page.getByRole('button', { name: 'Publish', exact: true }).click()
    const dialog = page.getByRole('dialog')
    await expect(dialog.getByText('Nothing is missing.')).toBeVisible({ timeout: 15_000 })
    await dialog.getByLabel('What changed').fill('What to do after the first port, with a film.')
    await dialog.getByLabel('Why').fill('Three people went on without waiting.')
    await dialog.getByRole('button', { name: `Publish version ${before.version + 1}` }).click()
    await expect(page.getByText(`Version ${before.version + 1} is published.`)).toBeVisible({ timeout: 15_000 })
    const after = await read<LessonView>(page, `/api/lessons/${lesson}`)
    expect(after.version).toBe(before.version + 1)
    for (const block of ['caution', 'steps', 'limit', 'figure', 'clip']) expect(after.html, block).toContain(block)
    expect(after.html).toContain('After the first port')
    expect(after.html).toContain('<table')
  })

  await test.step('a student mid-head keeps what he began with, and is told', async () => {
    const mail = await mailTo(school, 'imre', /^Lesson 7 has changed$/)
    expect(mail.text).toContain('Three people went on without waiting.')
    await imre.goto(`/lessons/${lesson}`)
    await expect(imre.getByRole('heading', { name: new RegExp(`you keep version ${before.version} `) })).toBeVisible()
    expect((await read<LessonView>(imre, `/api/lessons/${lesson}`)).html).toBe(before.html)
    await expect(imre.getByRole('heading', { name: 'After the first port' })).toHaveCount(0)
  })
})

test('an alumna finds a phrase of the captions, lands on the second, and goes on elsewhere', async ({ page, another }) => {
  test.setTimeout(90_000)
  await signIn(page, 'freya')
  await page.goto('/')
  await expect(page).toHaveURL(/\/shelf$/)
  await ready(page)

  await test.step('finds it and lands on the second', async () => {
    await page.getByRole('searchbox').fill('lip at twelve o\'clock')
    await page.getByRole('searchbox').press('Enter')
    const { items } = await read<{ items: SearchHit[] }>(page, `/api/search?q=${encodeURIComponent('lip at twelve o\'clock')}`)
    const hit = items.find(one => one.kind === 'caption')
    // The caption's own time, content/media/dummy-valves.captions.vtt.
    expect(Math.abs((hit?.seconds ?? 0) - 17.1)).toBeLessThan(0.2)
    await page.locator(`a[href*="clip="]`).first().click()
    await expect(page).toHaveURL(/\/lessons\/.*clip=/)
    const video = page.locator('video').first()
    await expect.poll(() => video.evaluate((element: HTMLVideoElement) => element.currentTime), { timeout: 15_000 }).toBeGreaterThan(16.5)
    await expect(page.getByText('Pen the lip at twelve o\'clock').first()).toBeVisible()
  })

  await test.step('stops at another second, and another device goes on there', async () => {
    const video = page.locator('video').first()
    await video.evaluate(async (element: HTMLVideoElement) => {
      element.muted = true
      element.currentTime = 9.2
      await element.play()
      await new Promise(resolve => setTimeout(resolve, 1200))
      element.pause()
    })
    const clip = new URL(page.url()).searchParams.get('clip') ?? ''
    await expect.poll(async () => (await read<MediaView>(page, `/api/media/${clip}`)).position?.seconds ?? 0).toBeGreaterThan(9)
    const phone = await another('phone')
    await signIn(phone, 'freya')
    await phone.goto('/shelf')
    await ready(phone)
    await phone.getByRole('link', { name: 'Go on' }).click()
    await expect.poll(() => phone.locator('video').first().evaluate((element: HTMLVideoElement) => element.currentTime), { timeout: 15_000 }).toBeGreaterThan(9)
    await expect.poll(() => phone.locator('video').first().evaluate((element: HTMLVideoElement) => element.currentTime)).toBeLessThan(14)
  })
})

test('a page of media is there for instructors', async ({ page }) => {
  await signIn(page, 'hanne')
  const { items } = await read<PageOf<MediaView>>(page, '/api/media')
  expect(items.map(one => one.title)).toContain('Dummy valves protect the seat')
})
