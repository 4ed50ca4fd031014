import { afterAll, beforeAll, expect, it } from 'vitest'
import { Mail } from '#server/db/entities/Mail'
import { User } from '#server/db/entities/User'
import { deliverMail } from '#server/services/mail/deliver-mail'
import { writeMail } from '#server/services/mail/write-mail'
import type { MailRow } from '#shared/contract/office'
import type { Page } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'

let harness: Harness, api: Api, school: TestSchool, corin: Caller
const em = () => harness.app.orm.em.fork()
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  corin = await api.as(school.corin)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

async function written(key: string, { template = 'welcome', subject = 'Tuesday: what to bring', state = 'sent' as Mail['state'] } = {}): Promise<string> {
  await em().transactional(tx => writeMail(tx, harness.app, { key, template, to: { id: school.imre.id, email: school.imre.email }, letter: { subject, paragraphs: [{ text: 'Cotton clothes.' }], action: null, from: 'Hanne' } }))
  const { id } = await em().findOneOrFail(Mail, { key })
  if (state !== 'waiting') await em().nativeUpdate(Mail, id, { state })
  return id
}
const list = async (query = '') => (await corin.get<Page<MailRow>>(`/api/mails${query}`)).body

it('finds messages by person, state, kind and words, a page at a time, and answers nothing of what they say', async () => {
  for (let at = 0; at < 5; at += 1) await written(`page:${at}`, { subject: `Balance ${at}`, template: 'balance-due' })
  await written('dead:1', { state: 'dead', subject: '100% wool' })
  const seen: string[] = []
  let after: string | null = null
  do {
    const page: Page<MailRow> = await list(`?template=balance-due&limit=2${after ? `&after=${after}` : ''}`)
    seen.push(...page.items.map(one => one.subject))
    after = page.next
  } while (after)
  expect(seen).toEqual(['Balance 4', 'Balance 3', 'Balance 2', 'Balance 1', 'Balance 0'])
  expect((await list('?state=dead')).items).toMatchObject([{ subject: '100% wool', person: { name: 'Imre Tallowin' } }])
  expect((await list('?search=100%25')).items).toHaveLength(1)
  expect((await list(`?person=${school.hanne.id}`)).items).toEqual([])
  expect(JSON.stringify(await list())).not.toContain('Cotton')
  expect(await corin.get('/api/mails?state=lost')).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  expect(await corin.get('/api/mails?after=zzz')).toMatchObject({ status: 422, body: { code: 'page_unknown' } })
})

it('sends a message again as one of its own, to the address its person has now, once a key', async () => {
  const id = await written('again:1', { state: 'dead' })
  await em().nativeUpdate(User, school.imre.id, { email: 'imre.tallowin@sallowbeck.example' })
  const key = crypto.randomUUID()
  const answers = [await corin.post<MailRow>(`/api/mails/${id}/resend`, {}, key), await corin.post<MailRow>(`/api/mails/${id}/resend`, {}, key)]
  expect(answers.map(one => one.status)).toEqual([201, 201])
  expect(answers[0]?.body.id).toBe(answers[1]?.body.id)
  expect(answers[0]?.body).toMatchObject({ state: 'waiting', to: 'imre.tallowin@sallowbeck.example' })
  await deliverMail(harness.app, String(answers[0]?.body.id))
  expect(JSON.stringify(harness.mail.inbox.list({}))).toContain('imre.tallowin@sallowbeck.example')
  expect(harness.mail.inbox.list({})).toHaveLength(1)
  expect(await em().findOneOrFail(Mail, id)).toMatchObject({ state: 'dead' })
})

it('does not send again what is on its way, or a link that works once', async () => {
  expect(await corin.post(`/api/mails/${await written('waiting:1', { state: 'waiting' })}/resend`)).toMatchObject({ status: 409, body: { code: 'mail_waiting' } })
  expect(await corin.post(`/api/mails/${await written('invitation:x', { template: 'invitation' })}/resend`)).toMatchObject({ status: 409, body: { code: 'mail_link_once' } })
  expect(await corin.post('/api/mails/00000000-0000-4000-8000-000000000000/resend')).toMatchObject({ status: 404, body: { code: 'mail_not_found' } })
})
