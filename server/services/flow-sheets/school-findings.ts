import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheet, type SheetFinding } from '#server/db/entities/FlowSheet'
import type { Upload } from '#server/db/entities/Upload'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { SheetReading } from '#shared/domain/airflow/sheet/sheet-reading'

const opOfStage = { base: 30, bowl: 100, port: 130, short: 150, final: 190 } as const
const stageInWords = { base: 'the baseline', bowl: 'the bowl', port: 'the port', short: 'the short turn', final: 'the finished head' } as const

/** What only the school can see of a sheet: another head's or stage's name on it, a port this head has not, a file that was used before. */
export async function schoolFindings(tx: EntityManager, submission: FoundSubmission, upload: Upload, reading: SheetReading): Promise<SheetFinding[]> {
  const head = submission.head.$
  const { cylinders } = head.casting.$.card
  const findings: SheetFinding[] = []
  const find = (code: string, severity: SheetFinding['severity'], text: string) => findings.push({ code, severity, lifts: [], text })

  const named = namesOf(reading.header.head)
  if (named.length > 0 && !named.includes(fold(head.number))) find('other-head', 'ask', `The sheet says it is of head ${reading.header.head}; this is ${head.number}. Is it the right sheet?`)
  const { stage } = reading.header
  if (stage !== null && opOfStage[stage] !== submission.op) find('other-stage', 'note', `The sheet says it is of ${stageInWords[stage]}, which is op ${opOfStage[stage]}; this is op ${submission.op}.`)
  const beyond = [...new Set(reading.runs.flatMap(run => run.cylinder !== null && run.cylinder > cylinders ? [run.cylinder] : []))]
  for (const cylinder of beyond) find('cylinder-not-on-head', 'refuse', `The sheet says cylinder ${cylinder}; this head has ${cylinders}.`)
  if (reading.kind === 'flow' && await isSeenBefore(tx, submission, upload)) find('seen-before', 'ask', 'This very file was used before. One run sent twice is one run.')
  return findings
}

/** The same bytes among this head's and this cohort's evidence. The answer never tells whose they were. */
async function isSeenBefore(tx: EntityManager, submission: FoundSubmission, upload: Upload): Promise<boolean> {
  const head = submission.head.$
  const among = head.cohort ? { $or: [{ id: head.id }, { cohort: head.cohort.id }] } : { id: head.id }
  return await tx.count(FlowSheet, { state: { $ne: 'set-aside' }, upload: { sha256: upload.sha256, id: { $ne: upload.id } }, submission: { head: among } }) > 0
}

/** Numbers of heads in a text: letters and figures, as stamped ("DNK-0147"). */
function namesOf(text: string | null): string[] {
  return (text?.match(/\b[A-Z]{2,5}[\s-]?\d{2,6}\b/gi) ?? []).map(fold)
}

const fold = (text: string) => text.toUpperCase().replace(/[^A-Z\d]/g, '')
