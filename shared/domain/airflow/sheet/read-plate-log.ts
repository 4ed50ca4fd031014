import { parseTypedNumber } from '../../units/parse-typed-number'
import { plateDrift } from '../plate-drift'
import type { ReadColumn } from './assign-columns'
import type { FoundTable } from './find-table'
import { readCell } from './read-cell'
import { readDate } from './read-date'
import type { PlateLog, SheetFinding, SheetNeed } from './sheet-reading'

/** Milliseconds of a day, for counting days between ISO dates. */
const dayMs = 86_400_000

/**
 * A bench's plate log: date and plate reading in each row, the nominal in the heading ("nominal 150.0") or from elsewhere.
 *
 * Rows whose date cannot be told are left out and asked about.
 */
export function readPlateLog(table: FoundTable, columns: readonly ReadColumn[], decimal: '.' | ',' | undefined, otherNominal: number | null): { log: PlateLog, findings: SheetFinding[], needs: SheetNeed[] } {
  const date = columns.find(column => column.quantity === 'date')
  const plate = columns.find(column => column.quantity === 'plate')
  const note = columns.find(column => column.quantity === 'note')
  const findings: SheetFinding[] = []
  const needs: SheetNeed[] = []
  const inHeading = /nominal\W*(\d[\d.,]*\d|\d)/i.exec(plate?.heading ?? '')
  const typed = inHeading ? parseTypedNumber(inHeading[1] ?? '', decimal === undefined ? {} : { decimal }) : null
  const nominal = typed?.ok ? typed.value : otherNominal

  const entries = table.rows.flatMap(({ cells }) => {
    const when = readDate(cells[date?.index ?? -1] ?? '')
    const value = readCell(cells[plate?.index ?? -1] ?? '', decimal)
    if (value.kind !== 'number' || !(value.value > 0)) return []
    if (when?.kind !== 'date') {
      if (when) findings.push({ code: 'ambiguous-date', severity: 'ask', lifts: [], text: `"${when.found}" can be ${when.either[0]} or ${when.either[1]}; that row was left out. Write the year first.` })
      return []
    }
    return [{ date: when.iso, reading: value.value, remark: note ? (cells[note.index] ?? '').trim() : '' }]
  })
  const unit = plate?.unit ?? null
  if (unit === null) needs.push({ field: 'flow-unit', question: 'In what unit are the plate readings? The log does not say.' })
  if (nominal === null) needs.push({ field: 'plate-nominal', question: 'What is the plate\'s nominal flow? The log does not say.' })
  const log: PlateLog = { unit, nominal, entries, drift: null }
  const [first] = entries
  if (nominal !== null && nominal > 0 && entries.length >= 4 && first) {
    const dayOf = (iso: string) => Math.round((Date.parse(iso) - Date.parse(first.date)) / dayMs)
    const { at: _, ...drift } = plateDrift(entries.map(entry => ({ day: dayOf(entry.date), reading: entry.reading })), nominal)
    log.drift = drift
    const label = unit ?? ''
    const dated = (day: number) => entries.find(entry => dayOf(entry.date) === day)
    if (Math.abs(drift.overLogPercent) > 0.5) findings.push({ code: 'bench-drift', severity: 'note', lifts: [], text: `The bench drifts ${drift.perWeek.toFixed(3)} ${label} a week, ${drift.overLogPercent.toFixed(2)} % over ${drift.days} days; scatter ${drift.scatter.toFixed(2)} ${label}. Correct each sheet by the plate of its day.` })
    const days = [...new Set([...drift.outliers, ...drift.outside].map(({ day }) => day))].sort((a, b) => a - b)
    for (const day of days) {
      const entry = dated(day)
      const residual = drift.outliers.find(one => one.day === day)?.residual
      const percent = drift.outside.find(one => one.day === day)?.percent
      const parts = [residual === undefined ? null : `${residual.toFixed(1)} ${label} from the line`, percent === undefined ? null : `${percent.toFixed(1)} % from the plate's nominal`].filter(part => part !== null)
      findings.push({ code: 'plate-off-line', severity: percent === undefined ? 'ask' : 'refuse', lifts: [], text: `${entry?.date ?? ''}: ${parts.join(', ')}${entry?.remark ? ` (${entry.remark})` : ''}. ${percent === undefined ? 'Read the plate again.' : 'No sheet of that day counts.'}` })
    }
  }
  return { log, findings, needs }
}
