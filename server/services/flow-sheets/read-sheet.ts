import type { EntityManager } from '@mikro-orm/postgresql'
import type { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import type { Upload } from '#server/db/entities/Upload'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { App } from '#server/utils/app'
import type { SheetInput } from '#shared/contract/inputs'
import { readFlowSheet, type SheetHelp } from '#shared/domain/airflow/sheet/read-flow-sheet'
import type { SheetReading, SheetTable } from '#shared/domain/airflow/sheet/sheet-reading'
import { baselineHeader } from './baseline-header'
import { readerProfiles } from './bench-profile'
import { columnChoices, typedColumns } from './column-choices'
import { keepable } from './keepable'
import { needChoices } from './need-choices'
import { schoolFindings } from './school-findings'
import { sheetAnswers } from './sheet-answers'
import { asChosen, sheetPreview } from './sheet-preview'
import { sheetTables } from './sheet-tables'

/** Name and version of the method that reads sheets. */
export const sheetMethod = 'sheet reader 1'

export type SheetAsRead = Pick<FlowSheetReading, 'kind' | 'bench' | 'header' | 'runs' | 'columns' | 'firstRows' | 'findings' | 'needs' | 'plateLog' | 'answers' | 'method'>

/**
 * Reads the raw file of a sheet, with the answers, the bench and the columns a person gave, now or for the reading before.
 * Nothing is written.
 *
 * @param before the reading before this one, if any
 * @throws {Refusal} sheet_unreadable, sheet_too_large, port_not_on_head; input_invalid for an answer or a column that cannot be
 */
export async function readSheet(tx: EntityManager, app: App, submission: FoundSubmission, sheet: FlowSheet, upload: Upload, input: SheetInput, before: FlowSheetReading | null): Promise<SheetAsRead> {
  const head = submission.head.$
  const { card } = head.casting.$
  const answers = sheetAnswers(before?.answers ?? {}, input, card.cylinders)
  const columns = columnChoices([...typedColumns(answers.columns ?? ''), ...input.columns ?? chosenBefore(before)])
  const profiles = readerProfiles()
  const profile = profiles.find(one => one.bench.toLowerCase() === answers.bench?.trim().toLowerCase()) ?? null
  const help: SheetHelp = { profile, profiles, answers, columns, casting: card }

  const { table, reading: alone } = firstRead(await sheetTables(await app.storage.read(upload.key), upload.detectedType ?? ''), help)
  const baseline = await baselineHeader(tx, head.id, sheet.id, alone)
  const reading = baseline === null ? alone : readFlowSheet(table, { ...help, baseline })
  const findings = await schoolFindings(tx, submission, upload, reading)
  return keepable({
    kind: reading.kind,
    bench: reading.header.bench?.slice(0, 60) ?? null,
    header: reading.header,
    runs: reading.runs,
    ...sheetPreview(table, reading, columns),
    findings: [...reading.findings, ...findings].sort((a, b) => rank[a.severity] - rank[b.severity]),
    needs: needChoices(reading, card.cylinders, profiles.map(one => one.bench)),
    plateLog: reading.plateLog,
    answers: Object.fromEntries(Object.entries(answers)),
    method: sheetMethod,
  })
}

const rank = { refuse: 0, ask: 1, note: 2 } as const

/** A workbook may begin with a cover: the first worksheet with a table is the sheet. */
function firstRead(tables: readonly [SheetTable, ...SheetTable[]], help: SheetHelp): { table: SheetTable, reading: SheetReading } {
  const all = tables.map(table => ({ table, reading: readFlowSheet(table, help) }))
  return all.find(({ reading }) => reading.runs.length > 0 || reading.plateLog !== null) ?? { table: tables[0], reading: readFlowSheet(tables[0], help) }
}

function chosenBefore(before: FlowSheetReading | null): NonNullable<SheetInput['columns']> {
  return (before?.columns ?? []).flatMap(({ from, meaning, unit }, index) => from === asChosen ? [{ index, meaning: meaning ?? 'other', ...(unit === null ? {} : { unit }) }] : [])
}
