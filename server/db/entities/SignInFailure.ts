import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/** A failed sign-in, counted by account and by address for fifteen minutes. Successes are never kept here. */
export const SignInFailure = defineEntity({
  name: 'SignInFailure',
  properties: {
    id: id(),
    /** "account:<e-mail>" or "address:<ip>". */
    subject: p.string().length(300),
    at: instant(),
  },
  indexes: [{ properties: ['subject', 'at'] }],
})
export type SignInFailure = InferEntity<typeof SignInFailure>
