import { LockMode } from '@mikro-orm/core'
import { Mail } from '#server/db/entities/Mail'
import type { App } from '#server/utils/app'

/**
 * Sends one message of the outbox, unless it went already or never can.
 *
 * The row is held while it is sent, so that a job run twice at once sends once. A connection cut after the mail server stored the
 * message cannot be told from one cut before: such a message may come twice, both times with the same message id.
 *
 * @throws {Error} when the mail server may take it later, so that the job is tried again
 */
export async function deliverMail(app: App, mailId: string): Promise<void> {
  const later = await app.orm.em.fork().transactional(async (tx): Promise<string | null> => {
    const mail = await tx.findOne(Mail, { id: mailId }, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!mail || mail.state !== 'waiting') return null
    const attachments = await Promise.all((mail.attachments ?? []).map(async ({ filename, key, contentType }) => ({ filename, contentType, content: await app.storage.read(key) })))
    const result = await app.mail.send({ messageId: mail.messageId, to: mail.to, subject: mail.subject, html: mail.html, text: mail.text, attachments })
    mail.tries += 1
    if (result.state === 'sent') {
      mail.state = 'sent'
      mail.sentAt = new Date()
      mail.providerId = result.providerId
      mail.problem = null
      return null
    }
    mail.problem = result.problem
    if (result.state === 'dead') mail.state = 'dead'
    return result.state === 'retry' ? result.problem : null
  })
  // Outside the transaction: the try that was counted stays counted.
  if (later !== null) throw new Error(`mail ${mailId} not sent yet: ${later}`)
}
