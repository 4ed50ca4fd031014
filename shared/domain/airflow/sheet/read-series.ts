import { convert } from '../../units/convert'
import type { Side } from '../../units/port'
import { findUnit } from '../../units/find-unit'
import { referenceBasis } from '../reference-basis'
import type { ColumnGroup, ReadColumn } from './assign-columns'
import type { FoundTable } from './find-table'
import { readCell } from './read-cell'
import { readCylinder, readSide } from './read-header-value'
import type { SheetFinding, SheetNeed, SheetUnit } from './sheet-reading'

/** One reading of a run, in cfm and Pa, nothing brought to the one basis yet. */
export interface RawPoint {
  liftMm: number
  flowCfm: number
  /** Pressure the flow figure belongs to. */
  flowPressurePa: number
  /** Pressure of the row as read; null when only the sheet's own is known. */
  rowPressurePa: number | null
  /** Leak column of the row; null when the sheet has none. */
  leakCfm: number | null
  /** Share of the range used; null when the sheet says nothing of ranges. */
  fraction: number | null
  /** The figure as the hand wrote it, and how many of it make one cfm at its pressure: for finding exchanged digits. */
  written: string
  writtenPerCfm: number
}

/** One run of one port as it stands on the sheet. */
export interface RawSeries {
  run: string | null
  cylinder: number | null
  side: Side | null
  points: RawPoint[]
  missing: { liftMm: number, reason: string }[]
  /** Reading at no lift; null without a zero-lift row. */
  zero: { flowCfm: number, pressurePa: number } | null
}

/** What the header and profile give the rows. */
export interface SeriesContext {
  decimal: '.' | ',' | undefined
  valveMm: number | null
  airDensity: number
  /** Pressure where a row has none. */
  pressurePa: number | null
  pressureUnit: SheetUnit | null
  fullScaleCfm: Record<string, number> | null
  /** The header says flow was brought to 28. */
  at28: boolean | null
  /** More lifts than this are no flow curve; the rest is left unread and said so. */
  mostLifts: number
}

/**
 * Reads the rows of a table into runs, by the columns' groups, by labels between blocks, and by run, cylinder and side columns.
 *
 * A nought at a real lift is a missing reading. A lift that comes twice in one run (a down-sweep) makes a second pass when it is most of
 * the curve, else the two are averaged and said so.
 */
export function readSeries(table: FoundTable, columns: readonly ReadColumn[], groups: readonly ColumnGroup[], context: SeriesContext): { series: RawSeries[], findings: SheetFinding[], needs: SheetNeed[] } {
  const findings: SheetFinding[] = []
  const needs: SheetNeed[] = []
  const lift = columns.find(column => column.quantity === 'lift')
  const note = columns.find(column => column.quantity === 'note')
  const by = (quantity: 'run' | 'cylinder' | 'side') => columns.find(column => column.quantity === quantity)
  if (!lift || groups.length === 0) return { series: [], findings, needs: [{ field: 'columns', question: 'Which column is the lift and which is the flow?' }] }
  if (lift.unit === null) needs.push({ field: 'lift-unit', question: `In what unit is "${lift.heading}"? The sheet does not say.` })
  if (lift.unit === 'lift/diameter' && context.valveMm === null) needs.push({ field: 'valve', question: 'Lift is given as a share of the valve diameter. What is the valve head diameter, with its unit?' })
  needs.push(...unitNeeds(groups, context))
  if (needs.length > 0) return { series: [], findings, needs }

  const passes = new Map<string, { run: string | null, cylinder: number | null, side: Side | null, rows: { liftMm: number, cells: string[], group: ColumnGroup }[] }>()
  const most = context.mostLifts * Math.max(1, new Set(table.rows.map(row => `${row.runLabel}|${row.cylinder}`)).size)
  if (table.rows.length > most) findings.push({ code: 'not-a-curve', severity: 'refuse', lifts: [], text: `The table has ${table.rows.length} rows; only the first ${most} were read. A flow sheet has a row for each lift.` })
  for (const { cells, runLabel, cylinder } of table.rows.slice(0, most)) {
    const liftCell = readCell(cells[lift.index] ?? '', context.decimal)
    if (liftCell.kind === 'ambiguous') findings.push({ code: 'ambiguous-number', severity: 'ask', lifts: [], text: `${lift.heading}: ${liftCell.message}` })
    if (liftCell.kind !== 'number') continue
    const liftMm = lift.unit === 'lift/diameter' ? liftCell.value * (context.valveMm ?? 0) : convert(liftCell.value, lift.unit as string, 'mm')
    if (liftMm < -0.005) {
      findings.push({ code: 'lift-out-of-bounds', severity: 'ask', lifts: [round(liftMm)], text: `A lift of ${lifts(liftMm)} is below the seat. Zero the dial and read that row again.` })
      continue
    }
    for (const group of groups) {
      const run = group.run ?? runLabel ?? textOf(cells, by('run'))
      const own = {
        run,
        cylinder: group.cylinder ?? cylinder ?? readCylinder(textOf(cells, by('cylinder')) ?? ''),
        side: group.side ?? readSide(textOf(cells, by('side')) ?? '', true),
      }
      const key = JSON.stringify(own)
      const pass = passes.get(key) ?? { ...own, rows: [] }
      pass.rows.push({ liftMm, cells, group })
      passes.set(key, pass)
    }
  }
  const series = [...passes.values()].flatMap(pass => splitPasses(pass.rows, findings).map((rows, i, all): RawSeries => {
    const read: RawSeries = { run: all.length > 1 ? `${pass.run ?? ''} pass ${i + 1}`.trim() : pass.run, cylinder: pass.cylinder, side: pass.side, points: [], missing: [], zero: null }
    for (const row of rows) readRow(read, row, note, context, findings)
    read.points = averageTwins(read.points)
    read.missing = read.missing.filter(gap => !read.points.some(point => sameLift(point.liftMm, gap.liftMm)))
    read.missing.sort((a, b) => a.liftMm - b.liftMm)
    return read
  }))
  return { series: series.filter(one => one.points.length > 0), findings: mergeNotes(findings), needs }
}

function unitNeeds(groups: readonly ColumnGroup[], context: SeriesContext): SheetNeed[] {
  const needs: SheetNeed[] = []
  const [first] = groups
  if (!first) return needs
  const usable = (group: ColumnGroup) => (group.reading !== null && context.fullScaleCfm !== null) || (group.flow !== null && group.flow.unit !== null)
  if (!groups.every(usable)) {
    if (first.reading && context.fullScaleCfm === null && first.flow === null) needs.push({ field: 'full-scale', question: 'Flow is given as a share of a range. What is the full scale of each range, with its unit?' })
    else needs.push({ field: 'flow-unit', question: `In what unit is "${(first.flow ?? first.reading)?.heading ?? 'the flow'}"? The sheet does not say.` })
  }
  const column = first.pressure
  if (column && column.unit === null && context.pressureUnit === null) needs.push({ field: 'pressure-unit', question: `In what unit is "${column.heading}"? The sheet does not say.` })
  const at28 = context.at28 === true || groups.every(group => group.flow?.heading_.basis === 'at28' && group.reading === null)
  const named = groups.every(group => group.flow?.heading_.pressure)
  if (!column && context.pressurePa === null && !at28 && !named) needs.push({ field: 'pressure', question: 'At what pressure was this run, with its unit? The sheet does not say.' })
  return needs
}

interface Row { liftMm: number, cells: string[], group: ColumnGroup }

/** Rows of one run parted where lifts come again. */
function splitPasses(rows: Row[], findings: SheetFinding[]): Row[][] {
  const passes: Row[][] = []
  for (const row of rows) {
    const pass = passes.find(one => !one.some(other => sameLift(other.liftMm, row.liftMm)))
    if (pass) pass.push(row)
    else passes.push([row])
  }
  const [first, ...more] = passes
  if (!first) return []
  const whole = more.filter(pass => pass.length >= Math.max(3, first.length / 2))
  const few = more.filter(pass => !whole.includes(pass)).flat()
  if (few.length > 0) {
    findings.push({ code: 'lift-read-twice', severity: 'note', lifts: few.map(row => round(row.liftMm)), text: `Read more than once at ${few.map(row => lifts(row.liftMm)).join(', ')}; the mean is used.` })
    first.push(...few)
  }
  return [first, ...whole]
}

function readRow(series: RawSeries, { liftMm, cells, group }: Row, note: ReadColumn | undefined, context: SeriesContext, findings: SheetFinding[]): void {
  const reason = note ? (cells[note.index] ?? '').trim() : ''
  const read = (column: ReadColumn | null) => column ? readCell(cells[column.index] ?? '', context.decimal) : null
  const range = group.range ? (cells[group.range.index] ?? '').trim().toUpperCase() : ''
  const fullScale = context.fullScaleCfm ? context.fullScaleCfm[range] ?? (Object.keys(context.fullScaleCfm).length === 1 ? Object.values(context.fullScaleCfm)[0] : undefined) : undefined

  const reading = read(group.reading)
  const flow = read(group.flow)
  for (const [cell, column] of [[reading, group.reading], [flow, group.flow]] as const) {
    if (cell?.kind === 'ambiguous') findings.push({ code: 'ambiguous-number', severity: 'ask', lifts: [round(liftMm)], text: `${column?.heading ?? ''} at ${lifts(liftMm)}: ${cell.message}` })
    if (cell?.kind === 'number' && cell.beside !== '' && !/^[a-z%\u2030/\d]+$/i.test(cell.beside)) findings.push({ code: 'note-in-cell', severity: 'note', lifts: [round(liftMm)], text: `"${cell.written} ${cell.beside}" at ${lifts(liftMm)}: the number was read and the mark left aside.` })
  }

  const pressureCell = read(group.pressure)
  const pressureUnit = group.pressure?.unit ?? context.pressureUnit
  const rowPressurePa = pressureCell?.kind === 'number' && pressureUnit !== null && pressureCell.value !== 0 ? convert(Math.abs(pressureCell.value), pressureUnit, 'Pa') : null
  const named = group.flow?.heading_.pressure
  const ownPressure = rowPressurePa ?? context.pressurePa ?? (named ? convert(named.value, named.unit, 'Pa') : null)

  let flowCfm: number | null = null
  let fraction: number | null = null
  let written = ''
  let writtenPerCfm = 1
  let flowPressurePa = ownPressure
  if (reading?.kind === 'number' && fullScale !== undefined && group.reading) {
    const parts = group.reading.unit === 'thousandths' ? 1000 : 100
    fraction = reading.value / parts
    flowCfm = fraction * fullScale
    written = reading.written
    writtenPerCfm = parts / fullScale
    const own = flow?.kind === 'number' && group.flow?.unit ? toCfm(flow.value, group.flow.unit, context.airDensity) : null
    if (own !== null && group.flow?.heading_.basis !== 'at28' && Math.abs(own - flowCfm) > Math.max(0.15, 0.015 * flowCfm)) {
      findings.push({ code: 'own-flow-differs', severity: 'ask', lifts: [round(liftMm)], text: `At ${lifts(liftMm)} the sheet writes ${own.toFixed(1)} cfm, but its own reading and full scale make ${flowCfm.toFixed(1)} cfm. Which is right?` })
    }
  }
  else if (flow?.kind === 'number' && group.flow?.unit && (group.reading === null || reading?.kind !== 'missing' || fullScale === undefined)) {
    flowCfm = toCfm(flow.value, group.flow.unit, context.airDensity)
    written = flow.written
    writtenPerCfm = flow.value === 0 ? 1 : flow.value / flowCfm
    const at28 = group.flow.heading_.basis === 'at28' || (context.at28 === true && group.flow.heading_.basis === null)
    if (at28) flowPressurePa = referenceBasis.pressurePa
    else if (named && rowPressurePa === null) flowPressurePa = convert(named.value, named.unit, 'Pa')
  }

  if (liftMm < 0.005) {
    if (flowCfm !== null && flowPressurePa !== null) series.zero = { flowCfm: Math.max(0, flowCfm), pressurePa: flowPressurePa }
    return
  }
  const text = [reading, flow].find(cell => cell?.kind === 'text')
  if (flowCfm === null || !(flowCfm > 0)) {
    const why = reason !== '' ? reason : text?.kind === 'text' ? `"${text.text}" is no number` : flowCfm === null ? 'no reading at this lift' : 'a nought at a real lift is no reading'
    series.missing.push({ liftMm, reason: why })
    return
  }
  if (flowPressurePa === null) {
    series.missing.push({ liftMm, reason: 'no pressure in this row or on the sheet' })
    return
  }
  const leakCell = read(group.leak)
  let leakCfm: number | null = null
  if (leakCell?.kind === 'number' && group.leak) {
    const unit = group.leak.unit
    if (unit === 'thousandths' || unit === 'percent') leakCfm = fullScale === undefined ? null : leakCell.value / (unit === 'thousandths' ? 1000 : 100) * fullScale
    else {
      const flowUnit = unit ?? group.flow?.unit ?? null
      leakCfm = flowUnit === null ? null : toCfm(leakCell.value, flowUnit, context.airDensity)
    }
    if (leakCfm !== null) leakCfm = Math.max(0, leakCfm)
  }
  series.points.push({ liftMm, flowCfm, flowPressurePa, rowPressurePa, leakCfm, fraction, written, writtenPerCfm })
}

/** Actual volume flow in cfm; a mass flow is divided by the density of the air that was measured. */
export function toCfm(value: number, unit: SheetUnit, airDensity: number): number {
  return convert(value, unit, 'cfm', findUnit(unit).dimension === 'mass-flow' ? { densityKgPerM3: airDensity } : {})
}

function averageTwins(points: RawPoint[]): RawPoint[] {
  const kept: RawPoint[][] = []
  for (const point of points) {
    const twins = kept.find(([first]) => first !== undefined && sameLift(first.liftMm, point.liftMm))
    if (twins) twins.push(point)
    else kept.push([point])
  }
  return kept.map((twins) => {
    const [first] = twins as [RawPoint]
    if (twins.length === 1) return first
    // Brought to the first one's pressure before they are averaged.
    const flowCfm = twins.reduce((sum, twin) => sum + twin.flowCfm * Math.sqrt(first.flowPressurePa / twin.flowPressurePa), 0) / twins.length
    return { ...first, flowCfm, written: '' }
  }).sort((a, b) => a.liftMm - b.liftMm)
}

/** Marks of one kind are one finding. */
function mergeNotes(findings: SheetFinding[]): SheetFinding[] {
  const marks = findings.filter(finding => finding.code === 'note-in-cell')
  if (marks.length < 2) return findings
  const [first] = marks as [SheetFinding]
  return [...findings.filter(finding => finding.code !== 'note-in-cell'), { ...first, lifts: marks.flatMap(mark => mark.lifts), text: `Marks beside the number at ${marks.length} lifts: the numbers were read and the marks left aside.` }]
}

function textOf(cells: string[], column: ReadColumn | undefined): string | null {
  const text = column ? (cells[column.index] ?? '').trim() : ''
  return text === '' ? null : text
}

function sameLift(a: number, b: number): boolean {
  return Math.abs(a - b) <= 0.02
}

function round(liftMm: number): number {
  return Math.round(liftMm * 1000) / 1000
}

function lifts(liftMm: number): string {
  return `${liftMm.toFixed(2)} mm (${(liftMm / 25.4).toFixed(3)} in)`
}
