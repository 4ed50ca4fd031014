import { afterEach, beforeEach, expect, it } from 'vitest'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Mail } from '#server/db/entities/Mail'
import { PasswordToken } from '#server/db/entities/PasswordToken'
import { User, type Role } from '#server/db/entities/User'
import { listStuckJobs } from '#server/services/jobs/list-stuck-jobs'
import { rerunJob } from '#server/services/jobs/rerun-job'
import { askForReset } from '#server/services/people/ask-for-reset'
import { endOwnSession } from '#server/services/people/end-own-session'
import { invitePerson } from '#server/services/people/invite-person'
import { listSessions } from '#server/services/people/list-sessions'
import { setPassword } from '#server/services/people/set-password'
import { endSessions, findBySignIn, openSession } from '#server/services/people/sign-in'
import type { Actor } from '#server/utils/actor'
import { hashPassword } from '#server/utils/passwords'
import { findActor } from '#server/utils/session'
import { openHarness, type Harness } from '../harness'

let harness: Harness
beforeEach(async () => {
  harness = await openHarness()
})
afterEach(() => harness?.close())

const em = (): EntityManager => harness.app.orm.em.fork()

async function person(email: string, password: string | null, roles: Role[] = ['student']): Promise<Actor> {
  const passwordHash = password === null ? null : await hashPassword(password)
  const user = await em().transactional(async (tx) => {
    const made = tx.create(User, { email, name: 'Imre Tallowin', roles, passwordHash, handAllowanceMm: null, createdAt: new Date() })
    tx.persist(made)
    return made
  })
  return { id: user.id, name: user.name, email, roles, unit: 'mm', sessionId: await openSession(em(), user.id, 'a browser') }
}

async function tokenFromMail(to: string): Promise<string> {
  const [mail] = await em().find(Mail, { to }, { orderBy: { createdAt: 'desc' }, limit: 1 })
  const token = /\/set-password\?token=([\w-]+)/.exec(mail?.text ?? '')?.[1]
  if (!token) throw new Error(`no link was written to ${to}`)
  return token
}

it('sets a new password by the link that was mailed, once, and ends every sign-in', async () => {
  const imre = await person('imre@sallowbeck.example', 'the old words here')
  await askForReset(em(), harness.app, 'imre@sallowbeck.example', '10.0.0.1')
  const token = await tokenFromMail('imre@sallowbeck.example')
  expect(await findActor(em(), imre.sessionId)).toMatchObject({ id: imre.id })
  await setPassword(em(), token, 'quite other words')

  expect(await findActor(em(), imre.sessionId)).toBeNull()
  expect(await findBySignIn(em(), 'imre@sallowbeck.example', 'the old words here', '10.0.0.1')).toBeNull()
  expect(await findBySignIn(em(), 'imre@sallowbeck.example', 'quite other words', '10.0.0.1')).toMatchObject({ id: imre.id })
  await expect(setPassword(em(), token, 'and a third time')).rejects.toMatchObject({ code: 'link_not_usable', status: 410 })
})

it('lets only one of two people who hold the same link at once set the password', async () => {
  await person('imre@sallowbeck.example', 'the old words here')
  await askForReset(em(), harness.app, 'imre@sallowbeck.example', '10.0.0.1')
  const token = await tokenFromMail('imre@sallowbeck.example')
  const ends = await Promise.allSettled([setPassword(em(), token, 'first of two words'), setPassword(em(), token, 'second of two words')])
  expect(ends.map(end => end.status).sort()).toEqual(['fulfilled', 'rejected'])
})

it('does not take a link that has run out, nor an earlier one once another was sent', async () => {
  await person('imre@sallowbeck.example', 'the old words here')
  await askForReset(em(), harness.app, 'imre@sallowbeck.example', '10.0.0.1')
  const first = await tokenFromMail('imre@sallowbeck.example')
  await askForReset(em(), harness.app, 'imre@sallowbeck.example', '10.0.0.1')
  const second = await tokenFromMail('imre@sallowbeck.example')
  await expect(setPassword(em(), first, 'quite other words')).rejects.toMatchObject({ code: 'link_not_usable' })
  await em().nativeUpdate(PasswordToken, {}, { expiresAt: new Date(Date.now() - 1000) })
  await expect(setPassword(em(), second, 'quite other words')).rejects.toMatchObject({ code: 'link_not_usable' })
  await expect(setPassword(em(), 'a token nobody ever made', 'quite other words')).rejects.toMatchObject({ code: 'link_not_usable' })
})

it('keeps only the hash of a link', async () => {
  await person('imre@sallowbeck.example', null)
  await askForReset(em(), harness.app, 'imre@sallowbeck.example', '10.0.0.1')
  const token = await tokenFromMail('imre@sallowbeck.example')
  const [row] = await em().find(PasswordToken, {})
  expect(JSON.stringify(row)).not.toContain(token)
})

it('answers an unknown e-mail as a known one, writes nothing for it, and takes as long', async () => {
  await person('imre@sallowbeck.example', 'the old words here')
  const timed = async (email: string): Promise<number> => {
    const start = performance.now()
    await askForReset(em(), harness.app, email, '10.0.0.1')
    return performance.now() - start
  }
  await timed('warm@sallowbeck.example')
  const [unknown, known] = [await timed('nobody@sallowbeck.example'), await timed('imre@sallowbeck.example')]
  expect(Math.min(unknown, known)).toBeGreaterThan(245)
  expect(Math.abs(unknown - known)).toBeLessThan(100)
  expect(await em().count(Mail)).toBe(1)
})

it('stops sending links after five for one e-mail, whether or not it is known', async () => {
  await person('imre@sallowbeck.example', 'the old words here')
  for (const email of ['imre@sallowbeck.example', 'nobody@sallowbeck.example']) {
    await Promise.all([1, 2, 3, 4, 5].map(async (n) => {
      await new Promise(done => setTimeout(done, n * 20))
      await askForReset(em(), harness.app, email, '10.0.0.1')
    }))
    await expect(askForReset(em(), harness.app, email, '10.0.0.1')).rejects.toMatchObject({ code: 'too_many_tries', status: 429, extra: { retryAfter: expect.any(Number) } })
  }
})

it('invites somebody, who then chooses a password and can sign in', async () => {
  const corin = await person('corin@sallowbeck.example', 'words of the admin', ['admin'])
  const made = await invitePerson(em(), harness.app, corin, { name: 'Wen Sallis', email: 'wen@sallowbeck.example', roles: ['student', 'student'] })
  expect(made.roles).toEqual(['student'])
  expect(await findBySignIn(em(), 'wen@sallowbeck.example', '', '10.0.0.1')).toBeNull()
  await setPassword(em(), await tokenFromMail('wen@sallowbeck.example'), 'slow hands, true numbers')
  expect(await findBySignIn(em(), 'wen@sallowbeck.example', 'slow hands, true numbers', '10.0.0.1')).toMatchObject({ id: made.id })
})

it('sends a new link to somebody who never came, and refuses an e-mail somebody signs in with', async () => {
  const corin = await person('corin@sallowbeck.example', 'words of the admin', ['admin'])
  const first = await invitePerson(em(), harness.app, corin, { name: 'Wen', email: 'wen@sallowbeck.example', roles: ['student'] })
  const again = await invitePerson(em(), harness.app, corin, { name: 'Wen Sallis', email: 'wen@sallowbeck.example', roles: ['student'] })
  expect(again).toMatchObject({ id: first.id, name: 'Wen Sallis' })
  await expect(invitePerson(em(), harness.app, corin, { name: 'X', email: 'corin@sallowbeck.example', roles: ['admin'] })).rejects.toMatchObject({ code: 'email_taken', status: 409 })
})

it('makes one account of two invitations sent at once', async () => {
  const corin = await person('corin@sallowbeck.example', 'words of the admin', ['admin'])
  const invite = () => invitePerson(em(), harness.app, corin, { name: 'Wen', email: 'wen@sallowbeck.example', roles: ['student'] })
  await Promise.allSettled([invite(), invite()])
  expect(await em().count(User, { email: 'wen@sallowbeck.example' })).toBe(1)
})

it('shows a person their own sign-ins, ends one, and then all', async () => {
  const imre = await person('imre@sallowbeck.example', 'the old words here')
  const other = await person('nadia@sallowbeck.example', 'the old words here')
  const second = await openSession(em(), imre.id, 'a phone')
  expect((await listSessions(em(), imre)).map(one => [one.id, one.thisOne])).toEqual([[second, false], [imre.sessionId, true]])
  await expect(endOwnSession(em(), imre, other.sessionId)).rejects.toMatchObject({ code: 'session_not_found', status: 404 })
  await endOwnSession(em(), imre, second)
  expect(await findActor(em(), second)).toBeNull()
  expect(await findActor(em(), imre.sessionId)).not.toBeNull()
  await openSession(em(), imre.id, 'a tablet')
  expect(await endSessions(em(), { userId: imre.id }, imre.id)).toBe(2)
  expect(await listSessions(em(), imre)).toEqual([])
  expect(await findActor(em(), other.sessionId)).not.toBeNull()
})

it('takes a role away at the next request, not at the next sign-in', async () => {
  const imre = await person('imre@sallowbeck.example', 'the old words here', ['student', 'instructor'])
  await em().nativeUpdate(User, { id: imre.id }, { roles: ['student'] })
  expect((await findActor(em(), imre.sessionId))?.roles).toEqual(['student'])
})

it('lists work that failed with what it said, and runs it again', async () => {
  const corin = await person('corin@sallowbeck.example', 'words of the admin', ['admin'])
  const { boss } = harness.app
  const id = await boss.send('prepare-photo', { photoId: crypto.randomUUID() }, { retryLimit: 0 })
  await boss.fetch('prepare-photo')
  await boss.fail('prepare-photo', id!, new Error('the picture would not open'))
  const stuck = await listStuckJobs(em())
  expect(stuck).toMatchObject([{ id, kind: 'prepare-photo', state: 'failed', problem: 'the picture would not open' }])
  await rerunJob(em(), harness.app, corin, id!)
  expect(await listStuckJobs(em())).toEqual([])
  expect(await boss.fetch('prepare-photo')).toMatchObject([{ data: stuck[0]!.data }])
  await expect(rerunJob(em(), harness.app, corin, id!)).rejects.toMatchObject({ code: 'job_not_found', status: 404 })
})

it('lists a message no mail server takes, and sends it when it is run again', async () => {
  const corin = await person('corin@sallowbeck.example', 'words of the admin', ['admin'])
  await invitePerson(em(), harness.app, corin, { name: 'Wen', email: 'wen@sallowbeck.example', roles: ['student'] })
  const [mail] = await em().find(Mail, {})
  await em().nativeUpdate(Mail, { id: mail!.id }, { state: 'dead', tries: 1, problem: '550 No such mailbox' })
  expect(await listStuckJobs(em())).toMatchObject([{ id: mail!.id, kind: 'send-mail', problem: '550 No such mailbox' }])
  await rerunJob(em(), harness.app, corin, mail!.id)
  expect((await em().findOneOrFail(Mail, mail!.id)).state).toBe('waiting')
})
