import type { Loaded } from '@mikro-orm/postgresql'
import type { FlowSheetReading } from '#server/db/entities/FlowSheet'
import type { SheetView } from '#shared/contract/views'

/** A flow sheet by one reading of it, as pages and other programs see it. */
export function viewSheet(reading: Loaded<FlowSheetReading, 'sheet' | 'sheet.upload'>): SheetView {
  const sheet = reading.sheet.$
  const { state } = sheet
  return {
    id: sheet.id,
    uploadId: sheet.upload.id,
    answers: reading.answers,
    version: reading.version,
    kind: reading.kind,
    state: state === 'set-aside' ? 'set aside' : state,
    filename: sheet.upload.$.filename,
    bench: reading.bench ?? null,
    header: reading.header,
    columns: reading.columns,
    firstRows: reading.firstRows,
    runs: reading.runs,
    findings: reading.findings,
    needs: reading.needs,
    plateLog: reading.plateLog ?? null,
  }
}
