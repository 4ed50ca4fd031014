import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { User } from './User'

/** The first answer to a POST, given again to the same key and body. */
export const IdempotencyKey = defineEntity({
  name: 'IdempotencyKey',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    key: p.uuid(),
    /** Method and path. */
    route: p.string().length(200),
    bodyHash: p.string().length(64),
    status: p.integer(),
    answer: p.json<unknown>(),
    at: instant(),
  },
  uniques: [{ properties: ['person', 'key'] }],
})
export type IdempotencyKey = InferEntity<typeof IdempotencyKey>
