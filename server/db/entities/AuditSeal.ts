import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/** The chain's head at a moment: a missing tail shows against it. */
export const AuditSeal = defineEntity({
  name: 'AuditSeal',
  properties: {
    id: id(),
    number: p.integer(),
    hash: p.string().length(64),
    at: instant(),
    /** "minute", or the release that asked for it. */
    reason: p.string().length(120),
  },
  indexes: [{ properties: ['number'] }],
})
export type AuditSeal = InferEntity<typeof AuditSeal>
