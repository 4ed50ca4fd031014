import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import { User } from '#server/db/entities/User'
import { firstName } from '#server/services/mail/first-name'
import { invitation } from '#server/services/mail/templates/invitation'
import { writeMail } from '#server/services/mail/write-mail'
import { issuePasswordLink } from '#server/services/people/issue-password-link'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import type { PlaceActor } from './note-place'

/**
 * Gives a place its account: the one that has its e-mail already, or a new one with an invitation to choose a password. Whoever
 * was invited before and never came gets a new link.
 *
 * The e-mail is the asker's own: the link that was mailed to it was opened, or the office typed it.
 */
export async function makeAccount(tx: EntityManager, app: App, place: BenchPlace, actor: PlaceActor): Promise<void> {
  if (place.person || place.email === '') return
  const email = place.email.toLowerCase()
  // The unique e-mail decides, whoever else makes the same account at this moment.
  const made = await tx.createQueryBuilder(User).insert({ id: crypto.randomUUID(), email, name: place.name, roles: ['student'], passwordHash: null, unit: 'mm', handAllowanceMm: null, createdAt: new Date() }).onConflict('email').ignore().execute('run')
  const user = await tx.findOneOrFail(User, { email }, { refresh: true })
  if (!user.roles.includes('student')) user.roles = [...user.roles, 'student']
  place.person = tx.getReference(User, user.id, { wrapped: true })
  const by = typeof actor === 'string' ? actor : actor.id
  recordEvent(tx, { actor: by, action: made.affectedRows > 0 ? 'person-invited' : 'person-linked', subject: `person:${user.id}`, detail: { place: place.id } })
  await tx.flush()
  if (user.passwordHash) return
  const link = await issuePasswordLink(tx, app.config.publicUrl, user.id, 'invitation')
  await writeMail(tx, app, { key: `invitation:${link.id}`, template: 'invitation', to: user, letter: invitation({ first: firstName(user.name), by: 'the school', url: link.url }) })
}
