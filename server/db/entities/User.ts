import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

export const roles = ['student', 'instructor', 'admin', 'safety'] as const
export type Role = (typeof roles)[number]

/** A person who can sign in. A sponsor has no account. */
export const User = defineEntity({
  name: 'User',
  tableName: 'app_user',
  properties: {
    id: id(),
    email: p.string().length(254).unique(),
    name: p.string().length(120),
    /** argon2id; null until an invitation is taken up. Goes out nowhere: people are answered as views. */
    passwordHash: p.text().nullable(),
    roles: p.array<Role>(r => r as Role),
    /** How this person likes lengths shown first. */
    unit: p.enum(['mm', 'in'] as const).default('mm'),
    /** Spread of the hand on the practice block, mm; null until measured. */
    handAllowanceMm: p.float().columnType('double precision').nullable(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type User = InferEntity<typeof User>
