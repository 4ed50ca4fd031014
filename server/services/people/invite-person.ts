import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { User } from '#server/db/entities/User'
import { firstName } from '#server/services/mail/first-name'
import { invitation } from '#server/services/mail/templates/invitation'
import { writeMail } from '#server/services/mail/write-mail'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { InvitationInput } from '#shared/contract/inputs'
import { issuePasswordLink } from './issue-password-link'

/**
 * Makes an account and sends its person the link to choose a password. Somebody invited before who never came gets a new link,
 * and the name and roles given now.
 *
 * @throws {Refusal} email_taken when somebody signs in with that e-mail already
 */
export async function invitePerson(em: EntityManager, app: App, actor: Actor, input: InvitationInput): Promise<{ id: string, name: string, email: string, roles: string[] }> {
  const roles = [...new Set(input.roles)]
  try {
    return await em.transactional(async (tx) => {
      const before = await tx.findOne(User, { email: input.email })
      if (before?.passwordHash) throw new Refusal('email_taken')
      const user = before ?? tx.create(User, { email: input.email, name: input.name, roles, passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
      user.name = input.name
      user.roles = roles
      tx.persist(user)
      await tx.flush()
      const link = await issuePasswordLink(tx, app.config.publicUrl, user.id, 'invitation')
      await writeMail(tx, app, { key: `invitation:${link.id}`, template: 'invitation', to: user, letter: invitation({ first: firstName(user.name), by: actor.name, url: link.url }) })
      recordEvent(tx, { actor: actor.id, action: 'person-invited', subject: `person:${user.id}`, detail: { roles, again: before !== null } })
      return { id: user.id, name: user.name, email: user.email, roles: user.roles }
    })
  }
  catch (thrown) {
    // Two invitations at the same moment: the second finds the first one's row.
    if (thrown instanceof UniqueConstraintViolationException) throw new Refusal('email_taken')
    throw thrown
  }
}
