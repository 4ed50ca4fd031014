import type { BenchView, FeedbackView, Page as PageOf, SubmissionView } from '#shared/contract/views'
import { bringBowl } from './bowl'
import { must, read, send } from './calls'
import { firstBowls } from './instants'
import { mailTo } from './mail'
import { scored, studentsAt } from './people'
import { criterion, judge, openReview } from './review-page'
import { expect, ready, signIn, test } from './walk'

// Everybody is about to cut a first bowl; each test takes a student of its own.
test.use({ until: firstBowls, story: 'holds', consoleMaySay: /status of 4(09|22)/ })

test('refuses the second bowl until Hold 4 is released', async ({ page, another }) => {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const [name = ''] = await studentsAt(hanne, 70)
  await signIn(page, name)
  const draft = await bringBowl(page)
  await must(page, `/api/submissions/${draft.id}/ask`)
  await scored(page, draft.id)

  await page.goto('/bench')
  await ready(page)
  await expect(page.getByRole('heading', { name: /Hold 4: wait for it\. Nothing is cut meanwhile/ })).toBeVisible()
  await expect(page.getByRole('button', { name: 'Begin the proof' })).toHaveCount(0)
  await page.goto('/route-card')
  await ready(page)
  await expect(page.locator('li', { has: page.getByRole('heading', { name: /^Bowl/ }) }).first()).toContainText('Hold 4 is asked and not released yet')
  await expect(page.locator('li', { has: page.getByRole('heading', { name: /^Guide boss/ }) }).first()).toContainText(/shut/i)
  await expect(page.getByRole('button', { name: 'Begin the proof' })).toHaveCount(0)
  const refused = await send(page, `/api/heads/${draft.head.id}/stages/70/submissions`)
  expect([refused.status, refused.body.code]).toEqual([409, 'stage_not_open'])
  const later = await send(page, `/api/heads/${draft.head.id}/stages/90/submissions`)
  expect([later.status, later.body.code]).toEqual([409, 'stage_not_open'])

  await openReview(hanne, draft.head.student.name)
  await judge(hanne, 'W-08', 'Accept', 'I stood by it: one port, the others as received.')
  await hanne.getByRole('button', { name: 'Release Hold 4' }).click()
  await expect(hanne.getByText(/Decided\. /)).toBeVisible()

  await page.goto('/bench')
  await ready(page)
  await page.getByRole('button', { name: 'Begin the proof' }).click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText('Op 70')
  const rest = await read<SubmissionView>(page, `/api/submissions/${page.url().split('/').at(-1)}`)
  expect(rest.part).toBe('rest')
})

test('releases a must on the line only with a reason', async ({ page, another, school }) => {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const name = (await studentsAt(hanne, 70))[1] ?? ''
  await signIn(page, name)
  // 36.90 on a valve of 41.00 is 90.0 %, the very end of the band: its doubt reaches over.
  const draft = await bringBowl(page, [{ quantity: 'throat-diameter', value: '36.90' }])
  await must(page, `/api/submissions/${draft.id}/ask`)
  await scored(page, draft.id)

  await openReview(hanne, draft.head.student.name)
  await expect(criterion(hanne, 'W-03i').locator('[data-state=borderline]').first()).toBeVisible()
  await judge(hanne, 'W-08', 'Accept', 'One port only.')
  await hanne.getByRole('button', { name: 'Release Hold 4' }).click()
  await expect(hanne.getByRole('alert')).toContainText('The release rule does not allow this')
  expect((await read<BenchView>(page, '/api/bench')).head?.stages.find(stage => stage.op === 70)?.points[0]?.state).toBe('asked')
  await hanne.getByRole('group', { name: 'To release, say why' }).getByLabel(/Throat as percent/).fill('Read again beside me: 36.8 across 2 to 8.')
  await hanne.getByRole('button', { name: 'Release Hold 4' }).click()
  await expect(hanne.getByText(/Decided\. /)).toBeVisible()

  const mail = await mailTo(school, name, /Hold 4: released/)
  expect(mail.text).toContain(draft.head.number)
})

test('cannot release a stop that is rejected, whoever says so, and stops the head', async ({ page, another, school }) => {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const name = (await studentsAt(hanne, 70))[2] ?? ''
  await signIn(page, name)
  // Under the hard least of 3.5 mm by more than the gauge's doubt.
  const draft = await bringBowl(page, [{ quantity: 'wall-thickness', spot: 'bowl, aft', value: '3.31' }])
  await must(page, `/api/submissions/${draft.id}/ask`)
  await scored(page, draft.id)

  await hanne.goto('/review')
  await ready(hanne)
  const first = hanne.getByRole('listitem').filter({ has: hanne.getByRole('link') }).filter({ hasText: /waiting/ }).first()
  await expect(first).toContainText('Stop stands')
  await openReview(hanne, draft.head.student.name)
  const wall = criterion(hanne, 'W-06')
  await expect(wall.locator('[data-state=reject]').first()).toBeVisible()
  await expect(wall.getByRole('button', { name: 'Override' })).toHaveCount(0)
  await expect(hanne.getByRole('note', { name: 'Hold 4 cannot be released yet.' })).toContainText(/rejected at .*and it is a stop/)
  await judge(hanne, 'W-08', 'Accept', 'One port only.')
  await hanne.getByRole('button', { name: 'Release Hold 4' }).click()
  await expect(hanne.getByRole('alert')).toContainText('The release rule does not allow this')
  const forced = await send(hanne, `/api/submissions/${draft.id}/review`, { seen: (await read<SubmissionView>(hanne, `/api/submissions/${draft.id}`)).version, overrides: [{ criterion: 'W-06', cylinder: draft.ports[0]?.cylinder, side: draft.ports[0]?.side, state: 'accept', reason: 'it will do' }], decision: 'release', point: 'hold-4' })
  expect(forced.status).toBeGreaterThanOrEqual(400)
  expect((await read<SubmissionView>(hanne, `/api/submissions/${draft.id}`)).state).toBe('scored')

  await hanne.getByLabel('Your words').fill('Put the bur down. I will come over with the gauge.')
  await hanne.getByRole('button', { name: 'Stop', exact: true }).click()
  await hanne.getByRole('dialog').getByRole('button', { name: 'Stop', exact: true }).click()
  await expect(hanne.getByText(/Decided\. /)).toBeVisible()
  const mail = await mailTo(school, name, /^Stop cutting/)
  expect(mail.text).toContain('Pressure test before anything else.')
  expect(mail.text).toMatch(/3\.31 mm/)

  await page.goto('/bench')
  await ready(page)
  await expect(page.getByRole('button', { name: 'Begin the proof' })).toHaveCount(0)
  await expect(page.getByText(/A stop stands on this head/).first()).toBeVisible()
  const refused = await send(page, `/api/heads/${draft.head.id}/stages/70/submissions`)
  expect([refused.status, refused.body.code]).toEqual([409, 'head_stopped'])
})

test('cannot release what was not shown, and takes it in a second try', async ({ page, another, school }) => {
  const hanne = await another('desktop')
  await signIn(hanne, 'hanne')
  const name = (await studentsAt(hanne, 70))[3] ?? ''
  await signIn(page, name)
  const draft = await bringBowl(page, [{ quantity: 'wall-thickness', value: null }], false)

  await page.goto(`/proof/${draft.id}`)
  await ready(page)
  await expect(page.getByText(/pieces are still missing/)).toBeVisible()
  await page.getByLabel(/A word to your instructor/).fill('The wall gauge is out.')
  await page.getByRole('button', { name: 'Ask for Hold 4' }).click()
  await expect(criterion(page, 'W-06').locator('[data-state=not-assessed]').first()).toBeVisible({ timeout: 20_000 })

  await openReview(hanne, draft.head.student.name)
  await expect(hanne.getByText('The wall gauge is out.')).toBeVisible()
  await judge(hanne, 'W-08', 'Accept', 'One port only.')
  await hanne.getByRole('button', { name: 'Release Hold 4' }).click()
  await expect(hanne.getByRole('alert')).toContainText('The release rule does not allow this')
  await expect(hanne.getByRole('note', { name: 'Hold 4 cannot be released yet.' })).toContainText(/wall thickness.*not assessed at .*and it is a stop/i)
  const forced = await send<{ code: string, refused: { criterion: string }[] }>(hanne, `/api/submissions/${draft.id}/review`, { seen: draft.version, reasons: [{ criterion: 'W-06', reason: 'looks thick' }], decision: 'release', point: 'hold-4' })
  expect([forced.status, forced.body.code]).toEqual([409, 'release_forbidden'])
  expect(forced.body.refused.map(one => one.criterion)).toContain('W-06')

  await hanne.getByLabel('Your words').fill('Show me the four walls, then ask again.')
  await hanne.getByRole('button', { name: 'Send back' }).click()
  await hanne.getByRole('dialog').getByRole('button', { name: 'Send back' }).click()
  await expect(hanne.getByText(/Decided\. /)).toBeVisible()
  expect((await mailTo(school, name, /to redo$/)).text).toContain('Show me the four walls')

  await page.goto('/bench')
  await ready(page)
  await expect(page.getByText('Sent back: add only what was asked for.')).toBeVisible()
  await page.getByRole('button', { name: 'Begin the proof' }).click()
  await expect(page.getByText(/try 2/)).toBeVisible()
  const again = await read<SubmissionView>(page, `/api/submissions/${page.url().split('/').at(-1)}`)
  expect(again.id).not.toBe(draft.id)
  // What the first try read stands: only the walls and the photos are wanted still.
  expect([...new Set(again.wanted.filter(want => want.kind === 'reading' && want.have < want.count).map(want => want.quantity))]).toEqual(['wall-thickness'])
  const feedback = await read<PageOf<FeedbackView>>(page, `/api/submissions/${draft.id}/feedback`)
  expect(feedback.items[0]?.decision).toBe('send-back')
})
