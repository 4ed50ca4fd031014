import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { FlowSheetReading } from '#server/db/entities/FlowSheet'
import type { ReadingAt } from '#server/db/entities/Reading'
import { Override } from '#server/db/entities/Review'
import type { ScoreSet } from '#server/db/entities/ScoreSet'
import type { FoundHead } from '#server/services/heads/find-head'
import type { EvidenceSet } from '#shared/domain/rubric/evidence'
import { spotOf } from '#shared/domain/rubric/spot-of'
import type { FoundSubmission } from './find-submission'

/** Name and version of the judgement; part of what every result says it rests on. */
export const judgeMethod = 'judge 1'

/** Hand allowance until a student's own is known, mm (handbook 3.1). */
export const usualHandAllowanceMm = 0.15

/**
 * Everything a submission is judged by: its head's whole evidence as it stands, less what was voided, set aside or cannot be used,
 * and the ids of those rows. A flow sheet counts by its newest reading. What an instructor gave for a judged criterion counts only
 * within the submission it was given for.
 *
 * Run it in one snapshot with the submission's version, else the two may tell of different moments.
 */
export function gatherEvidence(em: EntityManager, submission: FoundSubmission): Promise<Gathered> {
  return gatherForPart(em, submission.head.$, submission, submission.id)
}

export interface Gathered { evidence: EvidenceSet, restsOn: ScoreSet['restsOn'] }

/** The same for a part of a stage that nobody began yet (`submissionId` null). */
export async function gatherForPart(em: EntityManager, head: FoundHead, due: Pick<EvidenceSet, 'op' | 'part' | 'ports'>, submissionId: string | null): Promise<Gathered> {
  const readings = await readingsOfHead(em, head.id)
  const photos = await photosOfHead(em, head.id)
  const documents = await em.find(EvidenceDocument, { submission: { head: head.id }, setAsideAt: null }, { populate: ['submission'], orderBy: { addedAt: 'asc', id: 'asc' } })
  const sheets = await newestReadings(em, head.id)
  const overrides = submissionId === null ? [] : await em.find(Override, { result: { set: { submission: submissionId } } }, { populate: ['result'], orderBy: { at: 'desc' } })
  const judged = new Map<string, EvidenceSet['judged'][number]>()
  for (const one of overrides) {
    const { criterion, cylinder, side } = one.result.$
    const key = `${criterion}|${cylinder}|${side}`
    if (!judged.has(key)) judged.set(key, { criterion, cylinder: cylinder ?? null, side: side ?? null, state: one.state, note: one.reason })
  }
  const casting = head.casting.$
  return {
    evidence: {
      casting: casting.card,
      op: due.op,
      part: due.part,
      ports: due.ports,
      readings: readings.map(({ at, ...one }) => ({ ...one, spot: spotOf(at ?? {}) })),
      photos,
      documents: documents.map(one => ({ id: one.id, op: one.submission.$.op, note: one.note })),
      sheets: sheets.map(one => ({ id: one.sheet.id, op: one.sheet.$.submission.$.op, header: one.header, runs: one.runs, takenAt: one.sheet.$.addedAt.getTime() })),
      judged: [...judged.values()],
      acidCleaned: head.acidCleaned ?? null,
      handAllowanceMm: head.student.$.handAllowanceMm ?? usualHandAllowanceMm,
    },
    restsOn: {
      rubric: head.rubric.$.version,
      casting: `${casting.code} v${casting.version}`,
      method: judgeMethod,
      readings: readings.map(one => one.id),
      photos: photos.map(one => one.id),
      documents: documents.map(one => one.id),
      sheets: sheets.map(one => one.id),
    },
  }
}

type ReadingRow = Omit<EvidenceSet['readings'][number], 'spot'> & { at: ReadingAt | null }

/**
 * Readings that stand, oldest first. Plain rows: a head has a thousand of them before long, and made into entities, each with its
 * submission, they take longer than everything else of a judgement together.
 */
function readingsOfHead(em: EntityManager, headId: string): Promise<ReadingRow[]> {
  return em.getConnection().execute<ReadingRow[]>(`
    select r.id, r.quantity, s.op, r.cylinder, r.side, r.at, r."when", r."values", r.base_unit as unit, i.code as instrument, r.expanded_u as "expandedU", ${milliseconds('r.taken_at')} as "takenAt"
    from reading r join submission s on s.id = r.submission_id join instrument i on i.id = r.instrument_id
    where s.head_id = ? and r.voided_at is null
    order by r.taken_at, r.id`, [headId], 'all', em.getTransactionContext())
}

/** Photos that count, oldest first. */
function photosOfHead(em: EntityManager, headId: string): Promise<EvidenceSet['photos']> {
  return em.getConnection().execute<EvidenceSet['photos']>(`
    select p.id, p.view, s.op, p.cylinder, p.side, p.spot, ${milliseconds('p.taken_at')} as "takenAt"
    from photo p join submission s on s.id = p.submission_id
    where s.head_id = ? and p.set_aside_at is null and p.state <> 'cannot-use'
    order by p.taken_at, p.id`, [headId], 'all', em.getTransactionContext())
}

/** The driver gives instants as text and whole numbers of eight bytes too. */
const milliseconds = (column: string): string => `(extract(epoch from ${column}) * 1000)::double precision`

/**
 * The newest reading of every flow sheet of a head that is not raw nor set aside, oldest sheet first. One file is one run however often
 * it was sent to a stage: the newest of its sheets counts.
 */
export async function newestReadings(em: EntityManager, headId: string) {
  const all = await em.find(FlowSheetReading, { sheet: { submission: { head: headId }, state: { $nin: ['raw', 'set-aside'] } } }, { populate: ['sheet.submission', 'sheet.upload'], orderBy: { sheet: { addedAt: 'asc', id: 'asc' }, version: 'desc' } })
  const seen = new Set<string>()
  const newest = all.filter(one => !seen.has(one.sheet.id) && seen.add(one.sheet.id))
  const fileOf = ({ sheet }: (typeof newest)[number]) => `${sheet.$.submission.$.op} ${sheet.$.upload.$.sha256}`
  return newest.filter((one, at) => !newest.slice(at + 1).some(later => fileOf(later) === fileOf(one)))
}
