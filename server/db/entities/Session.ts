import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { User } from './User'

/** One sign-in. The cookie names it; ending the row ends the cookie everywhere at once. */
export const Session = defineEntity({
  name: 'Session',
  tableName: 'auth_session',
  properties: {
    id: id(),
    user: () => p.manyToOne(User).ref(),
    createdAt: instant().onCreate(() => new Date()),
    expiresAt: instant(),
    endedAt: instant().nullable(),
    /** Browser as it named itself, cut to 200 characters, so that a person can tell their own sign-ins apart. */
    agent: p.string().length(200).default(''),
  },
  indexes: [{ properties: ['user', 'endedAt'] }],
})
export type Session = InferEntity<typeof Session>
