import type { EntityManager } from '@mikro-orm/postgresql'
import { beforeFirst, eventColumns, linkHash, type EventRow } from './link-hash'

export interface AuditProblem {
  kind: 'gap' | 'event-missing' | 'hash-differs' | 'tail-missing' | 'seal-differs' | 'unsealed'
  /** Number of the link it stands at; null for rows that have none. */
  number: number | null
  sentence: string
}

export interface AuditVerdict {
  links: number
  seals: number
  head: { number: number, hash: string }
  /** In the order of the chain; the first is the first bad row. Empty when the record is whole. */
  problems: AuditProblem[]
}

const pageSize = 2000
const unsealedAfterMs = 5 * 60_000

/**
 * Recomputes the whole chain from its first row and holds every seal against it.
 *
 * Names the first row that was changed, removed or put in; seals beyond the last link (a missing tail) or of another hash;
 * and rows unsealed for over five minutes. After the first bad row the chain is not followed further: everything behind it rests on it.
 */
export async function verifyAudit(em: EntityManager, now: Date): Promise<AuditVerdict> {
  const connection = em.getConnection()
  const seals = await connection.execute<{ number: number, hash: string }[]>('select number, hash from audit_seal order by number')
  const problems: AuditProblem[] = []
  let number = 0
  let hash = beforeFirst
  let nextSeal = 0

  chain: for (;;) {
    const page = await connection.execute<(EventRow & { number: number, hash: string, event_id: string })[]>(
      `select l.number, l.hash, l.event_id, ${eventColumns} from audit_link l left join audit_event e on e.id = l.event_id where l.number > ? order by l.number limit ?`, [number, pageSize])
    for (const link of page) {
      if (link.number !== number + 1) {
        problems.push({ kind: 'gap', number: number + 1, sentence: `Link ${number + 1} is missing; the next one there is ${link.number}.` })
        break chain
      }
      if (link.id === null) {
        problems.push({ kind: 'event-missing', number: link.number, sentence: `Link ${link.number} names event ${link.event_id}, which is gone.` })
        break chain
      }
      const computed = linkHash(hash, link.number, link)
      if (computed !== link.hash) {
        problems.push({ kind: 'hash-differs', number: link.number, sentence: `Link ${link.number} (event ${link.id}, ${link.action} of ${link.subject}) is not what was sealed: the event or the link was changed.` })
        break chain
      }
      number = link.number
      hash = computed
      for (let seal = seals[nextSeal]; seal && seal.number <= number; seal = seals[++nextSeal]) {
        if (seal.number < number || seal.hash === hash) continue
        problems.push({ kind: 'seal-differs', number, sentence: `The seal of link ${number} has another hash than the chain.` })
        break chain
      }
    }
    if (page.length < pageSize) break
  }

  const beyond = problems.length === 0 ? seals.slice(nextSeal).find(seal => seal.number > number) : undefined
  if (beyond) problems.push({ kind: 'tail-missing', number: number + 1, sentence: `The chain ends at link ${number}, but link ${beyond.number} was sealed: its tail is missing.` })
  problems.push(...await unsealed(em, now))
  return { links: number, seals: seals.length, head: { number, hash }, problems }
}

async function unsealed(em: EntityManager, now: Date): Promise<AuditProblem[]> {
  const before = new Date(now.getTime() - unsealedAfterMs)
  const [row] = await em.getConnection().execute<{ waiting: number, first: string | null }[]>(
    `select count(*)::int as waiting, (array_agg(e.id order by e.at))[1] as first from audit_event e
     left join audit_link l on l.event_id = e.id
     where e.at < ? and (l.number is null or (l.linked_at < ? and l.number > coalesce((select max(number) from audit_seal), 0)))`, [before, before])
  if (!row || row.waiting === 0) return []
  return [{ kind: 'unsealed', number: null, sentence: `${row.waiting} ${row.waiting === 1 ? 'event has' : 'events have'} waited over five minutes for the sealer; the first is ${row.first}.` }]
}
