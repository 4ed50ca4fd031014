import type { SubmissionView } from '#shared/contract/views'
import { read } from './calls'
import { bettanyHold5 } from './instants'
import { mailTo } from './mail'
import { sheetFile, takePicture } from './picture'
import { criterion, openReview } from './review-page'
import { expect, ready, signIn, test } from './walk'

// The evening before: bowls are done, and a seat's edge was rounded without anybody knowing.
test.use({ until: bettanyHold5, story: 'bettany', consoleMaySay: /status of 409/ })

test('finds the lost low lifts, sends them back, and compares the second try with the first', async ({ page, another, school }) => {
  test.setTimeout(120_000)
  await signIn(page, 'bettany')

  await test.step('hands in sheet 09 and asks', async () => {
    await page.goto('/bench')
    await ready(page)
    await page.getByRole('link', { name: 'Proof tray' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('Op 100')
    await ready(page)
    await page.locator('input[type=file][accept*=".csv"]').setInputFiles(sheetFile('09_crake_int_bowl_lost_low_lift.csv'))
    await expect(page.getByRole('link', { name: /09_crake.*cylinder 1 intake/ })).toBeVisible({ timeout: 20_000 })
    await page.getByRole('button', { name: 'Ask for Hold 5' }).click()
    const loss = criterion(page, 'FB-01')
    await expect(loss.locator('[data-state]').first()).toHaveAttribute('data-state', 'reject', { timeout: 20_000 })
    const said = await loss.innerText()
    // Losses beyond doubt of tests/fixtures/sheets/expected.json, sheet 09 against 13.
    for (const lift of ['1', '2', '3']) expect(said, `the sentence names ${lift} mm`).toMatch(new RegExp(`\\b${lift}(\\.0+)?( mm|,| and)`))
    await expect(criterion(page, 'FB-02i').locator('[data-state]').first()).toHaveAttribute('data-state', 'accept')
  })
  const first = page.url().split('/').at(-1) ?? ''

  const marit = await another('desktop')
  const words = 'The top is up and it is real, but three low lifts are down together: that is the seat. Show me 12 o’clock under the loupe.'
  await test.step('is sent back with words and a pin', async () => {
    await signIn(marit, 'marit')
    await openReview(marit, 'Bettany Crake')
    await marit.getByRole('button', { name: 'Release Hold 5' }).click()
    await expect(marit.getByRole('alert')).toContainText('The release rule does not allow this')
    await expect(marit.getByRole('note', { name: 'Hold 5 cannot be released yet.' })).toContainText(/a must, rejected/)
    await marit.getByRole('button', { name: 'Pin a spot' }).click()
    const photo = marit.getByRole('heading', { name: 'Photos' }).locator('xpath=ancestor::section[1]').getByRole('group').first()
    await photo.scrollIntoViewIfNeeded()
    const box = await photo.boundingBox()
    await marit.mouse.click((box?.x ?? 0) + (box?.width ?? 0) * 0.4, (box?.y ?? 0) + (box?.height ?? 0) * 0.4)
    await marit.getByLabel('Words for pin 1').fill('Was the valve turned here?')
    await marit.getByLabel('Your words').fill(words)
    await marit.getByRole('button', { name: 'Send back' }).click()
    await marit.getByRole('dialog').getByRole('button', { name: 'Send back' }).click()
    await expect(marit.getByText(/Decided\. /)).toBeVisible()
    const mail = await mailTo(school, 'bettany', /DNK-0152 .*to redo$/)
    expect(mail.text).toContain('three low lifts are down together')
    expect(mail.text).toMatch(/Don't cut/)
  })

  await test.step('reads it and begins the second try', async () => {
    await page.getByRole('link', { name: 'Read the feedback' }).click()
    await expect(page.getByRole('heading', { name: 'Hold 5 sent back' })).toBeVisible()
    await expect(page.getByText(words)).toBeVisible()
    await expect(page.locator('[data-pin="1"]')).toBeVisible()
    await page.getByRole('link', { name: 'My bench' }).last().click()
    await expect(page.getByText('Sent back: add only what was asked for.')).toBeVisible()
    await ready(page)
    await page.getByRole('button', { name: 'Begin the proof' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('Op 100')
    await expect(page.getByText(/try 2/)).toBeVisible()
  })

  await test.step('runs the intake again with the seat made good, and asks again', async () => {
    await ready(page)
    const wanted = page.locator('input[type=file][accept="image/*"]')
    for (let left = await wanted.count(); left > 0; left--) {
      await wanted.first().setInputFiles(await takePicture())
      await expect(wanted).toHaveCount(left - 1, { timeout: 20_000 })
    }
    // Made for this test: sheet 09 with its three lowest lifts as a whole seat gives them, a little over the baseline of sheet 13.
    const better = sheetFile('09_crake_int_bowl_lost_low_lift.csv', text => text.replace('Date;04.03.2026', 'Date;10.03.2026')
      .replace('1,0;2,49;4,74', '1,0;2,49;5,40').replace('2,0;2,50;9,76', '2,0;2,50;10,75').replace('3,0;2,50;14,83', '3,0;2,50;15,95'))
    await page.locator('input[type=file][accept*=".csv"]').setInputFiles({ ...better, name: 'crake_int_bowl_again.csv' })
    await expect(page.getByRole('link', { name: /crake_int_bowl_again.*cylinder 1 intake/ })).toBeVisible({ timeout: 20_000 })
    await page.getByRole('button', { name: 'Ask for Hold 5' }).click()
    await expect(criterion(page, 'FB-01').locator('[data-state]').first()).toHaveAttribute('data-state', 'accept', { timeout: 20_000 })
  })

  await test.step('both tries are kept and stand side by side', async () => {
    const second = await read<SubmissionView>(page, `/api/submissions/${page.url().split('/').at(-1)}`)
    expect([second.try, second.firstTry?.id]).toEqual([2, first])
    await openReview(marit, 'Bettany Crake')
    const both = marit.getByRole('table', { name: 'First try and this try' }).getByRole('row', { name: /No lift may lose flow/ })
    await expect(both.locator('[data-state]').nth(0)).toHaveAttribute('data-state', 'reject')
    await expect(both.locator('[data-state]').nth(1)).toHaveAttribute('data-state', 'accept')
    await page.goto(`/proof/${first}`)
    await expect(criterion(page, 'FB-01').locator('[data-state]').first()).toHaveAttribute('data-state', 'reject')
  })
})
