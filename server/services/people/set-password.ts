import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { PasswordToken } from '#server/db/entities/PasswordToken'
import { hashPassword } from '#server/utils/passwords'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { hashOfSecret } from './issue-password-link'
import { endSessions } from './sign-in'

/**
 * Sets the password of whoever holds a good link, uses the link up and ends every sign-in of that person.
 *
 * @throws {Refusal} link_not_usable when it was used, has run out or never was
 */
export async function setPassword(em: EntityManager, token: string, password: string): Promise<void> {
  const good = (now: Date) => ({ secretHash: hashOfSecret(token), usedAt: null, expiresAt: { $gt: now } })
  // Looked at first, so that only holders of a link can make the server hash.
  if (!(await em.findOne(PasswordToken, good(new Date())))) throw new Refusal('link_not_usable')
  const passwordHash = await hashPassword(password)
  await em.fork().transactional(async (tx) => {
    const link = await tx.findOne(PasswordToken, good(new Date()), { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!link) throw new Refusal('link_not_usable')
    const user = await link.user.loadOrFail()
    link.usedAt = new Date()
    user.passwordHash = passwordHash
    recordEvent(tx, { actor: user.id, action: 'password-set', subject: `person:${user.id}`, detail: { by: link.purpose } })
    await endSessions(tx, { userId: user.id }, user.id)
  })
}
