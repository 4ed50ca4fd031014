import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'

/**
 * Something that happened, written in the transaction that did it. Never changed: a trigger refuses.
 * The sealer later gives it a number and chains it in `AuditSealedRow`.
 */
export const AuditEvent = defineEntity({
  name: 'AuditEvent',
  properties: {
    id: id(),
    at: instant(),
    /** Person's id, or a job's name. Never a name or an e-mail. */
    actor: p.string().length(80),
    action: p.string().length(80),
    /** "submission:<id>" and the like. */
    subject: p.string().length(120),
    /** Canonical JSON (sorted keys, no spaces) as text, so that its bytes are what was hashed. */
    detail: p.text(),
  },
  indexes: [{ properties: ['subject'] }],
})
export type AuditEvent = InferEntity<typeof AuditEvent>
