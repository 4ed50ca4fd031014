import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Mail } from '#server/db/entities/Mail'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { MailRow } from '#shared/contract/office'

/** Hold a link that works once, and may have been used or have run out: a new one is asked for, not the old one sent again. */
const linksOnce: readonly string[] = ['invitation', 'password-reset']

/**
 * Sends a message again, as a message of its own with the same words and files: to the address its person has now, so that a corrected
 * one gets it. The first keeps what became of it.
 *
 * @throws {Refusal} mail_not_found, mail_waiting while it is still on its way, or mail_link_once
 */
export async function resendMail(em: EntityManager, app: App, actor: Actor, id: string): Promise<MailRow> {
  return em.transactional(async (tx) => {
    const before = await tx.findOne(Mail, id, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!before) throw new Refusal('mail_not_found')
    if (before.state === 'waiting') throw new Refusal('mail_waiting')
    if (linksOnce.includes(before.template)) throw new Refusal('mail_link_once')
    const person = await before.person?.loadOrFail()
    const again = crypto.randomUUID()
    const mail = tx.create(Mail, {
      id: again,
      key: `again:${before.id}:${again}`,
      template: before.template,
      person: person ?? null,
      to: person?.email ?? before.to,
      subject: before.subject,
      html: before.html,
      text: before.text,
      attachments: before.attachments ?? null,
      state: 'waiting',
      tries: 0,
      messageId: `${again}@${new URL(app.config.publicUrl).hostname}`,
      providerId: null,
      problem: null,
      createdAt: new Date(),
      sentAt: null,
    })
    tx.persist(mail)
    recordEvent(tx, { actor: actor.id, action: 'mail-resent', subject: `mail:${before.id}`, detail: { as: again } })
    await tx.flush()
    await enqueue(app, tx, 'send-mail', { mailId: again })
    return {
      id: again, template: mail.template, to: mail.to, person: person ? { id: person.id, name: person.name } : null, subject: mail.subject,
      state: mail.state, tries: 0, problem: null, createdAt: mail.createdAt.toISOString(), sentAt: null,
    }
  })
}
