import { createHash, randomBytes } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { PasswordToken } from '#server/db/entities/PasswordToken'
import { User } from '#server/db/entities/User'

const lastsMs = { reset: 3_600_000, invitation: 7 * 24 * 3_600_000 }

/** A link with which its person sets a password, once. Earlier links of the same person stop working; only the secret's hash is kept. */
export async function issuePasswordLink(tx: EntityManager, publicUrl: string, userId: string, purpose: keyof typeof lastsMs): Promise<{ id: string, url: string }> {
  const now = new Date()
  await tx.nativeUpdate(PasswordToken, { user: userId, usedAt: null, expiresAt: { $gt: now } }, { expiresAt: now })
  const secret = randomBytes(32).toString('base64url')
  const token = tx.create(PasswordToken, { user: tx.getReference(User, userId), purpose, secretHash: hashOfSecret(secret), expiresAt: new Date(now.getTime() + lastsMs[purpose]), usedAt: null, createdAt: now })
  tx.persist(token)
  await tx.flush()
  return { id: token.id, url: `${publicUrl}/set-password?token=${secret}` }
}

export function hashOfSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex')
}
