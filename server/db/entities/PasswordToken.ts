import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { User } from './User'

/** A single-use link to set a password: an invitation, or a reset. Only the hash of the secret is kept. */
export const PasswordToken = defineEntity({
  name: 'PasswordToken',
  properties: {
    id: id(),
    user: () => p.manyToOne(User).ref(),
    purpose: p.enum(['reset', 'invitation'] as const),
    secretHash: p.string().length(64).unique(),
    expiresAt: instant(),
    usedAt: instant().nullable(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type PasswordToken = InferEntity<typeof PasswordToken>
