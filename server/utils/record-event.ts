import type { EntityManager } from '@mikro-orm/postgresql'
import { AuditEvent } from '../db/entities/AuditEvent'
import { canonicalJson } from './canonical-json'

/**
 * Writes what happened into the audit record, in the caller's transaction. Ids and codes only:
 * names and e-mails never go in, so that the record can outlive them.
 */
export function recordEvent(em: EntityManager, event: { actor: string, action: string, subject: string, detail?: Record<string, unknown>, at?: Date }): void {
  em.persist(em.create(AuditEvent, { actor: event.actor, action: event.action, subject: event.subject, detail: canonicalJson(event.detail ?? {}), at: event.at ?? new Date() }))
}
