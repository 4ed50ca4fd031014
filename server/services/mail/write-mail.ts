import type { EntityManager } from '@mikro-orm/postgresql'
import { Mail } from '#server/db/entities/Mail'
import { User } from '#server/db/entities/User'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import type { Letter } from './letter'
import { renderLetter } from './render-letter'

export interface MailToWrite {
  /** Says the same message once: "hold-released:<review>". A second write with the key changes and sends nothing. */
  key: string
  template: string
  /** `id` of the account; null for somebody who has none (yet): a visitor, a sponsor. */
  to: { id: string | null, email: string }
  letter: Letter
  /** Files that go with it, by their keys in storage. */
  attachments?: MailAttachment[]
}

/** A file in storage that goes with a message. */
export interface MailAttachment { filename: string, key: string, contentType: string }

/** Puts a message into the outbox, and the work of sending it into the queue, in the caller's transaction. */
export async function writeMail(tx: EntityManager, app: App, { key, template, to, letter, attachments }: MailToWrite): Promise<void> {
  const { subject, html, text } = await renderLetter(letter)
  const id = crypto.randomUUID()
  // The unique key decides, whoever else writes the same message at this moment.
  const written = await tx.createQueryBuilder(Mail).insert({
    id,
    key,
    template,
    person: to.id === null ? null : tx.getReference(User, to.id),
    to: to.email,
    subject,
    html,
    text,
    attachments: attachments ?? null,
    state: 'waiting',
    tries: 0,
    messageId: `${id}@${new URL(app.config.publicUrl).hostname}`,
    createdAt: new Date(),
  }).onConflict('key').ignore().execute('run')
  if (written.affectedRows > 0) await enqueue(app, tx, 'send-mail', { mailId: id })
}
