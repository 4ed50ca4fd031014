import { afterEach, beforeEach, expect, it } from 'vitest'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Mail } from '#server/db/entities/Mail'
import { User } from '#server/db/entities/User'
import { deliverMail } from '#server/services/mail/deliver-mail'
import { renderLetter } from '#server/services/mail/render-letter'
import { evidenceSentBack } from '#server/services/mail/templates/evidence-sent-back'
import { holdReleased } from '#server/services/mail/templates/hold-released'
import { stopped } from '#server/services/mail/templates/stopped'
import { writeMail } from '#server/services/mail/write-mail'
import { openHarness, type Harness } from '../harness'

let harness: Harness
beforeEach(async () => {
  harness = await openHarness()
})
afterEach(() => harness?.close())

const em = (): EntityManager => harness.app.orm.em.fork()
const letter = { subject: 'A subject', paragraphs: [{ text: 'Some words.' }], action: null, from: 'Hanne' }

async function person(email: string): Promise<User> {
  return em().transactional(async (tx) => {
    const user = tx.create(User, { email, name: 'Imre Tallowin', roles: ['student'], passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
    tx.persist(user)
    return user
  })
}

async function write(to: User, key: string): Promise<void> {
  await em().transactional(tx => writeMail(tx, harness.app, { key, template: 'test', to, letter }))
}

const waitingJobs = async (): Promise<number> => (await em().getConnection().execute<{ n: number }[]>(`select count(*)::int as n from pgboss.job where name = 'send-mail'`))[0]!.n

it('sends a message once, however often it is written and delivered', async () => {
  const to = await person('imre@sallowbeck.example')
  await write(to, 'hold-released:1')
  await write(to, 'hold-released:1')
  await Promise.all([write(to, 'hold-released:2'), write(to, 'hold-released:2'), write(to, 'hold-released:2')])
  expect(await waitingJobs()).toBe(2)
  const [one] = await em().find(Mail, { key: 'hold-released:1' })
  await Promise.all([deliverMail(harness.app, one!.id), deliverMail(harness.app, one!.id), deliverMail(harness.app, one!.id)])
  await deliverMail(harness.app, one!.id)
  expect(harness.mail.inbox.list({})).toHaveLength(1)
  expect(await em().findOneOrFail(Mail, one!.id)).toMatchObject({ state: 'sent', tries: 1 })
})

it('writes neither message nor work when the change it tells of is undone', async () => {
  const to = await person('imre@sallowbeck.example')
  await expect(em().transactional(async (tx) => {
    await writeMail(tx, harness.app, { key: 'undone:1', template: 'test', to, letter })
    throw new Error('undone')
  })).rejects.toThrow('undone')
  expect(await em().count(Mail)).toBe(0)
  expect(await waitingJobs()).toBe(0)
})

it('tries again later what the mail server would not take now, and counts the try', async () => {
  const to = await person('imre@sallowbeck.example')
  await write(to, 'later:1')
  const [mail] = await em().find(Mail, {})
  harness.mail.faults.laterNext = 1
  await expect(deliverMail(harness.app, mail!.id)).rejects.toThrow(/not sent yet/)
  expect(await em().findOneOrFail(Mail, mail!.id)).toMatchObject({ state: 'waiting', tries: 1 })
  await deliverMail(harness.app, mail!.id)
  expect(await em().findOneOrFail(Mail, mail!.id)).toMatchObject({ state: 'sent', tries: 2, problem: null })
})

it('carries the same message id both times when the first acknowledgement was lost', async () => {
  const to = await person('imre@sallowbeck.example')
  await write(to, 'lost:1')
  const [mail] = await em().find(Mail, {})
  harness.mail.faults.dropAckNext = 1
  await expect(deliverMail(harness.app, mail!.id)).rejects.toThrow(/not sent yet/)
  await deliverMail(harness.app, mail!.id)
  const ids = harness.mail.inbox.list({}).map(message => harness.mail.inbox.raw(message.id)!.toString('utf8').match(/^Message-ID: (.*)$/mi)?.[1])
  expect(ids).toEqual([`<${mail!.messageId}>`, `<${mail!.messageId}>`])
})

it('gives up on an address no mail server takes, without trying for ever', async () => {
  const to = await person('nobody@refused.example')
  await write(to, 'dead:1')
  const [mail] = await em().find(Mail, {})
  await deliverMail(harness.app, mail!.id)
  await deliverMail(harness.app, mail!.id)
  expect(await em().findOneOrFail(Mail, mail!.id)).toMatchObject({ state: 'dead', tries: 1 })
})

it('escapes what people typed, keeps a subject to one line, and says the same in plain text', async () => {
  const { subject, html, text } = await renderLetter(stopped({
    first: '<img src=x onerror=alert(1)>', head: 'DNK-0147', where: 'pushrod wall,\r\nBcc: x@y.example', wallOrLeak: false, measured: null, reason: 'a & b', instructor: 'Hanne', nothingElse: false, url: 'http://127.0.0.1:3000/feedback',
  }))
  expect(subject).toBe('Stop cutting DNK-0147 pushrod wall, Bcc: x@y.example until we have spoken')
  expect(html).not.toContain('<img')
  expect(html).toContain('&lt;img src=x')
  expect(html).toContain('a &amp; b')
  expect(html).not.toContain('<style')
  expect(text).toContain('a & b')
  expect(text).toContain('http://127.0.0.1:3000/feedback')
})

it('opens a stop for a wall or a leak with the words for thin walls', async () => {
  // Handbook 7: the first words on such a stop.
  const words = 'Pressure test before anything else. This estimate has a doubt; the metal may be worse.'
  const given = { first: 'Dele', head: 'DNK-0166', where: 'pushrod wall', measured: 'Wall is 3.10 mm, limit 3.5 mm, doubt 0.15 mm', reason: '', instructor: 'Hanne', nothingElse: true, url: 'http://127.0.0.1:3000/' }
  expect((await renderLetter(stopped({ ...given, wallOrLeak: true }))).text.startsWith(words)).toBe(true)
  expect((await renderLetter(stopped({ ...given, wallOrLeak: false }))).text).not.toContain(words)
})

it('counts what is to be redone in the subject of evidence sent back', async () => {
  const one = { first: 'Bettany', head: 'DNK-0152', stage: 'Flow check after bowl', instructor: 'Marit', accepted: 7, assessed: 9, redo: [{ criterion: 'Low lift', text: 'Lost at 1 mm.' }], where: [], feedback: '', url: 'http://127.0.0.1:3000/' }
  expect((await renderLetter(evidenceSentBack(one))).subject).toBe('DNK-0152 Flow check after bowl: one thing to redo')
  const two = await renderLetter(evidenceSentBack({ ...one, redo: [...one.redo, { criterion: 'Plate', text: 'Drifted.' }] }))
  expect(two.subject).toBe('DNK-0152 Flow check after bowl: two things to redo')
  expect(two.text).toContain('7 of 9 accepted')
  expect(two.text).toContain('  - Plate. Drifted.')
})

it('names every condition and the lesson in a release', async () => {
  const { subject, text } = await renderLetter(holdReleased({ head: 'DNK-0147', point: 'Hold 4', instructor: 'Hanne Brockwell', at: '19:40 on Thursday 26 March', conditions: ['no more cutting at 8 o\'clock'], next: 'The other bowls, as the first.', lesson: { number: 7, title: 'The bowl' }, feedback: '', url: 'http://127.0.0.1:3000/' }))
  expect(subject).toBe('Hold 4: released - you may go on')
  expect(text).toContain('with a condition:\n  - no more cutting at 8 o\'clock')
  expect(text).toContain('Next stroke: The other bowls, as the first. Read lesson 7, The bowl, first.')
})
