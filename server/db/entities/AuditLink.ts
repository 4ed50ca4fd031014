import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { AuditEvent } from './AuditEvent'
import { instant } from './column'

/** A committed audit event's number and hash, each hash over the one before it. Written by the sealer alone. */
export const AuditLink = defineEntity({
  name: 'AuditLink',
  properties: {
    number: p.integer().primary().autoincrement(false),
    event: () => p.oneToOne(AuditEvent).ref().owner().unique(),
    hash: p.string().length(64),
    linkedAt: instant(),
  },
})
export type AuditLink = InferEntity<typeof AuditLink>
