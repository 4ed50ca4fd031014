import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { startMail, type MailStandIn } from '../../../scripts/stand-ins/mail/start-mail'
import { smtpMail } from '../../../server/adapters/mail/smtp'
import type { MailSender } from '../../../server/adapters/mail/mail'

let dir: string
let mail: MailStandIn
let sender: MailSender

const start = async () => {
  mail = await startMail({ dir, smtpPort: 0, pagePort: 0, now: () => new Date('2026-03-26T19:40:00Z') })
  sender = smtpMail({ url: mail.smtpUrl, from: 'School <school@sallowbeck.example>' })
}
const message = (more: object = {}) => ({ messageId: 'one@sallowbeck.example', to: 'imre@sallowbeck.example', subject: 'Hold 4 – released', html: '<p>Öl &amp; iron</p>', text: 'Öl & iron', ...more })
const get = async (path: string) => (await fetch(mail.pageUrl + path)).json()

beforeEach(async () => {
  dir = mkdtempSync(join(tmpdir(), 'mail-'))
  await start()
})
afterEach(async () => {
  sender.close()
  await mail.close()
  rmSync(dir, { recursive: true, force: true })
})

it('takes a message and shows it as it was sent', async () => {
  expect(await sender.send(message())).toMatchObject({ state: 'sent' })
  const { items: [got] } = await get('/api/messages?to=IMRE@sallowbeck.example') as { items: object[] }
  expect(got).toMatchObject({ to: ['imre@sallowbeck.example'], from: 'school@sallowbeck.example', subject: 'Hold 4 – released', messageId: '<one@sallowbeck.example>', html: '<p>Öl &amp; iron</p>' })
  expect(await get('/api/messages?to=bettany@sallowbeck.example')).toEqual({ items: [] })
})
it('gives what came after a message, and one by its id', async () => {
  await sender.send(message())
  await sender.send(message({ messageId: 'two@sallowbeck.example', subject: 'Second' }))
  const { items } = await get('/api/messages') as { items: { id: string }[] }
  expect(items).toHaveLength(2)
  expect(await get(`/api/messages?after=${items[0]?.id}`)).toMatchObject({ items: [{ subject: 'Second' }] })
  expect(await get(`/api/messages/${items[1]?.id}`)).toMatchObject({ subject: 'Second' })
  expect((await fetch(`${mail.pageUrl}/api/messages/999`)).status).toBe(404)
})
it('keeps messages over its own end, and forgets them when told', async () => {
  await sender.send(message())
  sender.close()
  await mail.close()
  await start()
  expect(mail.inbox.list({})).toHaveLength(1)
  expect((await fetch(`${mail.pageUrl}/api/messages`, { method: 'DELETE' })).status).toBe(204)
  expect(mail.inbox.list({})).toEqual([])
  expect(readdirSync(dir)).toEqual([])
})
it('shows a page on which a message\'s markup stays a message', async () => {
  await sender.send(message({ subject: '<script>alert(1)</script>', html: '<script>alert(2)</script>"' }))
  const page = await (await fetch(`${mail.pageUrl}/messages/000000000001`)).text()
  expect(page).not.toContain('<script>')
  expect(page).toContain('sandbox srcdoc=')
})
it('says later when told to, and the sender knows it may try again', async () => {
  mail.faults.laterNext = 1
  expect(await sender.send(message())).toMatchObject({ state: 'retry', problem: expect.stringContaining('451') })
  expect(await sender.send(message())).toMatchObject({ state: 'sent' })
  expect(mail.inbox.list({})).toHaveLength(1)
})
it('can keep a message and lose its own answer; the second copy has the same id', async () => {
  mail.faults.dropAckNext = 1
  expect(await sender.send(message())).toMatchObject({ state: 'retry' })
  expect(await sender.send(message())).toMatchObject({ state: 'sent' })
  expect(mail.inbox.list({}).map(one => one.messageId)).toEqual(['<one@sallowbeck.example>', '<one@sallowbeck.example>'])
})
it('refuses an address that does not exist, for good', async () => {
  expect(await sender.send(message({ to: 'nobody@refused.example' }))).toMatchObject({ state: 'dead', problem: expect.stringContaining('550') })
})
it('gives messages that arrive together numbers of their own', async () => {
  await Promise.all(Array.from({ length: 10 }, (_, n) => sender.send(message({ messageId: `m${n}@sallowbeck.example` }))))
  expect(new Set(mail.inbox.list({}).map(one => one.id)).size).toBe(10)
})
it('calls it a retry when nobody is there', async () => {
  await mail.close()
  expect(await sender.send(message())).toMatchObject({ state: 'retry' })
  await start()
})
it('sends to the one address it was given, whatever signs are in it', async () => {
  await sender.send(message({ to: 'imre@sallowbeck.example, bettany@sallowbeck.example' }))
  expect(mail.inbox.list({ to: 'bettany@sallowbeck.example' })).toEqual([])
})
