import { readFileSync } from 'node:fs'
import { decodeSheetBytes } from '#shared/domain/airflow/sheet/decode-sheet-bytes'
import { readFlowSheet } from '#shared/domain/airflow/sheet/read-flow-sheet'
import { splitDelimitedText } from '#shared/domain/airflow/sheet/split-delimited-text'
import type { SheetEvidence } from '#shared/domain/rubric/evidence'
import { casting } from './school'

/** A practice sheet as evidence of an op; the sheets and what they show are described in tests/fixtures/sheets. */
export function sheetEvidence(file: string, op: number, takenAt = op): SheetEvidence {
  const bytes = readFileSync(new URL(`../../fixtures/sheets/${file}`, import.meta.url))
  const read = readFlowSheet(splitDelimitedText(decodeSheetBytes(bytes)), { casting: casting('D') })
  return { id: file, op, header: read.header, runs: read.runs, takenAt }
}
