import { createHash } from 'node:crypto'
import { canonicalJson } from '#server/utils/canonical-json'

/** An audit event as the database has it; `at` as text to the microsecond, because a Date would round a changed digit away. */
export interface EventRow { id: string, at: string, actor: string, action: string, subject: string, detail: string }

/** What the first link's hash is over, there being none before it. */
export const beforeFirst = '0'.repeat(64)

/** Columns of `audit_event e` as an EventRow. */
export const eventColumns = `e.id, to_char(e.at at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"') as at, e.actor, e.action, e.subject, e.detail`

/** Hash of a link: SHA-256, in hex, over the hash before it, a line break, and the numbered event as canonical JSON. */
export function linkHash(before: string, number: number, event: EventRow): string {
  const { id, at, actor, action, subject, detail } = event
  return createHash('sha256').update(before).update('\n').update(canonicalJson({ number, id, at, actor, action, subject, detail })).digest('hex')
}
