import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/** An ask for a place, counted by e-mail and by address so that nobody can flood the school; gone after an hour. */
export const AskTry = defineEntity({
  name: 'AskTry',
  properties: {
    id: id(),
    subject: p.string().length(300),
    at: instant(),
  },
  indexes: [{ properties: ['subject', 'at'] }],
})
export type AskTry = InferEntity<typeof AskTry>
