import { convert } from '../../units/convert'
import type { CastingCard } from '../../geometry/casting'
import type { SheetHeader } from '../flow-run'
import { airDensity } from '../air-density'
import { flowToOneBasis } from '../flow-to-one-basis'
import { referenceBasis } from '../reference-basis'
import { assignColumns, groupColumns, profileColumn, type ReadColumn } from './assign-columns'
import { findDecimalSign } from './find-decimal-sign'
import { findSheetFaults } from './find-sheet-faults'
import { findTable, type FoundTable } from './find-table'
import type { Heading } from './heading-words'
import { plainText } from './plain-text'
import { readHeader, type RawHeader } from './read-header'
import { inUnit, readCylinder, readFullScale, readHeaderNumber, readSide, readStage } from './read-header-value'
import { readPlateLog } from './read-plate-log'
import { type RawSeries, readSeries, toCfm } from './read-series'
import { reduceRuns } from './reduce-runs'
import { readDate } from './read-date'
import type { BenchProfile, ColumnChoices, SheetAnswers, SheetColumn, SheetFinding, SheetNeed, SheetReading, SheetTable, SheetUnit } from './sheet-reading'
import { findUnitWord } from './unit-words'

/** What may help a reading; all of it may be left out. */
export interface SheetHelp {
  /** The profile a person chose. */
  profile?: BenchProfile | null
  /** All profiles of the school: the one of the bench the sheet names is used when none was chosen. */
  profiles?: readonly BenchProfile[]
  /** Answers to earlier `needs`. */
  answers?: SheetAnswers
  columns?: ColumnChoices
  /** Card of the casting the sheet is of: gives the seat diameter and the usual curves. */
  casting?: CastingCard | null
  /** Header of the baseline this sheet will be held against. */
  baseline?: SheetHeader | null
}

/**
 * Reads a flow sheet, or a bench's plate log, of any bench: finds its table and header, brings every reading to the one basis
 * and says what is missing, doubtful or impossible. Nothing is guessed and nothing repaired: what the sheet does not say is a
 * question in `needs`, and what looks wrong is a finding.
 *
 * Units: the answer is in mm, cfm at 28 inH2O and 1.2041 kg/m3, Pa, °C, hPa, per cent.
 * Source: handbook 4.
 */
export function readFlowSheet(given: SheetTable, help: SheetHelp = {}): SheetReading {
  const table = { rows: given.rows.slice(0, limits.rows).map(row => row.slice(0, limits.columns).map(cell => cell.slice(0, limits.characters))) }
  const guessed = findDecimalSign(table)
  const profile = help.profile ?? profileOfBench(table, guessed, help.profiles ?? [])
  const decimal = guessed ?? profile?.decimal
  const found = findTable(table, decimal, profile ? heading => profileMeaning(profile, heading) : undefined, help.columns)
  const raw = readHeader((found ? found.rest : table.rows).slice(0, limits.headerRows), decimal)
  if (raw.bench === null && profile) raw.bench = profile.bench
  const answers = help.answers ?? {}
  applyAnswers(raw, answers)

  if (found === null) {
    const { header, needs, findings } = closeHeader(raw, profile, [], null)
    return { kind: 'flow', header, runs: [], columns: [], findings, needs: [{ field: 'columns', question: 'No table of lift against flow was found. Which row holds the headings, and which columns are lift and flow?' }, ...needs], plateLog: null }
  }
  const columns = assignColumns(found, withAnsweredUnits(found, help.columns ?? {}, answers), profile, { lift: raw.liftUnit, flow: raw.flowUnit })
  if (found.kind === 'plate-log') {
    const nominal = raw.plateNominal?.value ?? profile?.plateNominal?.value ?? null
    const { log, findings, needs } = readPlateLog(found, columns, decimal, nominal)
    return { kind: 'plate-log', header: closeHeader(raw, profile, [], null).header, runs: [], columns: columns.map(toWire), findings, needs, plateLog: log }
  }
  return readRuns(found, columns, raw, decimal, profile, help)
}

function readRuns(found: FoundTable, columns: ReadColumn[], raw: RawHeader, decimal: '.' | ',' | undefined, profile: BenchProfile | null, help: SheetHelp): SheetReading {
  const groups = groupColumns(columns)
  const air = airOf(raw)
  const densityDone = raw.basis.densityDone ?? (groups.some(group => group.flow?.heading_.densityDone) || (profile?.densityCorrected ?? false))
  const measuredDensity = air ?? referenceBasis.densityKgPerM3
  const headerPressure = positive(inUnit(raw.pressure, 'Pa')) ?? (profile?.pressure ? convert(profile.pressure.value, profile.pressure.unit, 'Pa') : null)
  const fullScaleCfm = fullScaleOf(raw, profile, measuredDensity)
  const { series, findings, needs } = readSeries(found, columns, groups, {
    mostLifts: limits.lifts,
    decimal,
    valveMm: positive(inUnit(raw.lengths.valve ?? null, 'mm')),
    airDensity: measuredDensity,
    pressurePa: headerPressure,
    pressureUnit: raw.pressure?.unit ?? profile?.pressure?.unit ?? null,
    fullScaleCfm,
    at28: raw.basis.at28,
  })

  const closed = closeHeader(raw, profile, series, headerPressure)
  const header = closed.header
  const density = densityDone ? referenceBasis.densityKgPerM3 : measuredDensity
  header.airDensity = density
  const leakPressure = raw.leakPressurePa ?? headerPressure ?? series[0]?.points[0]?.flowPressurePa ?? null
  const headerLeakCfm = leakOf(raw, fullScaleCfm, measuredDensity, series)
  const headerLeak = headerLeakCfm !== null && leakPressure !== null ? { flowCfm: headerLeakCfm, pressurePa: leakPressure } : null
  const reduced = reduceRuns(series, { airDensity: density, plateRatio: header.plateRatio, headerLeak, cylinder: raw.cylinder, side: raw.side })
  const atBasis = (flowCfm: number, pressurePa: number) => flowToOneBasis({ flowCfm, leakCfm: 0, pressurePa, airDensity: density, plateRatio: header.plateRatio }).cfm28

  const zeroRows = series.flatMap(one => one.zero ? [atBasis(one.zero.flowCfm, one.zero.pressurePa)] : [])
  const zeroRowCfm28 = zeroRows.length > 0 ? Math.max(...zeroRows) : null
  const leaks = [
    ...zeroRows,
    ...(headerLeak ? [atBasis(headerLeak.flowCfm, headerLeak.pressurePa)] : []),
    ...series.flatMap(one => one.points.flatMap(point => point.leakCfm === null ? [] : [atBasis(point.leakCfm, point.flowPressurePa)])),
  ]
  header.leakCfm28 = leaks.length > 0 ? Math.max(...leaks) : null

  const notes: SheetFinding[] = [...closed.findings, ...findings]
  if (air === null && !densityDone) notes.push({ code: 'air-not-given', severity: 'note', lifts: [], text: 'The sheet gives no air temperature and pressure; air of 1.2041 kg/m3 was taken. A warm day or a low barometer is worth up to 3 %.' })
  if (reduced.some(one => one.series.length > 1)) notes.push({ code: 'several-runs', severity: 'note', lifts: [], text: `${Math.max(...reduced.map(one => one.series.length))} runs of one port: each reading was brought to 28 inH2O and one density first, then averaged.` })
  if (columns.some(column => column.heading_.statistic === 'mean' && !groups.some(group => group.flow === column || group.reading === column)) && reduced.some(one => one.series.length > 1)) notes.push({ code: 'own-mean-ignored', severity: 'note', lifts: [], text: 'The sheet\'s own mean column was not used: it averages readings taken at different pressures.' })
  if (fullScaleCfm && raw.fullScale?.pressurePa && headerPressure && Math.abs(raw.fullScale.pressurePa / headerPressure - 1) > 0.02) {
    notes.push({ code: 'range-at-other-pressure', severity: 'ask', lifts: [], text: `The full-scale table is for ${(raw.fullScale.pressurePa / 249.08891).toFixed(1)} inH2O, the run is at ${(headerPressure / 249.08891).toFixed(1)}. Which holds?` })
  }
  const allNeeds = [...needs, ...closed.needs, ...portNeeds(series, raw)]
  if (reduced.some(one => one.run.points.length < 3)) notes.push({ code: 'not-a-curve', severity: 'refuse', lifts: [], text: 'Fewer than three lifts could be read: that is no curve.' })
  const faults = findSheetFaults(reduced, { header, zeroRowCfm28, casting: help.casting ?? null, baseline: help.baseline ?? null })
  return {
    kind: 'flow',
    header,
    runs: reduced.map(one => one.run),
    columns: columns.map(toWire).map(column => column.quantity === 'pressure' && column.unit === null && raw.pressure?.unit ? { ...column, unit: raw.pressure.unit, unitFrom: 'heading' } : column),
    findings: [...faults, ...notes].sort((a, b) => rank[a.severity] - rank[b.severity]),
    needs: allNeeds.filter((need, i) => allNeeds.findIndex(other => other.field === need.field) === i),
    plateLog: null,
  }
}

/** A flow sheet is a page. What is larger is read this far and no further, so that no file can hold the program up. */
const limits = { rows: 5000, columns: 64, characters: 400, headerRows: 200, lifts: 200 }

const rank = { refuse: 0, ask: 1, note: 2 } as const

function profileOfBench(table: SheetTable, decimal: '.' | ',' | undefined, profiles: readonly BenchProfile[]): BenchProfile | null {
  if (profiles.length === 0) return null
  // The bench is named in the header; a first look without the table's rows is enough to find it.
  const { bench } = readHeader(table.rows.slice(0, 40).filter(row => row.filter(cell => /^\s*[+-]?[\d.,]+\s*$/.test(cell)).length < 2), decimal)
  return bench === null ? null : profiles.find(profile => profile.bench.toLowerCase() === bench.toLowerCase()) ?? null
}

function profileMeaning(profile: BenchProfile, heading: string): Heading | null {
  const known = profileColumn(profile, heading)
  return known ? { ...known, run: null, cylinder: null, side: null, statistic: null, basis: null, densityDone: false, pressure: null } : null
}

function withAnsweredUnits(found: FoundTable, choices: ColumnChoices, answers: SheetAnswers): ColumnChoices {
  const result: ColumnChoices = { ...choices }
  const answer = (field: 'lift-unit' | 'flow-unit' | 'pressure-unit', quantity: 'lift' | 'flow' | 'pressure' | 'plate', kind: 'length' | 'flow' | 'pressure') => {
    const text = answers[field]
    const unit = text ? findUnitWord(plainText(text), kind)?.unit : undefined
    if (!unit) return
    found.meanings.forEach((meaning, index) => {
      if (meaning?.quantity === quantity && meaning.unit === null && !result[String(index)]?.unit) result[String(index)] = { ...result[String(index)], unit }
    })
  }
  answer('lift-unit', 'lift', 'length')
  answer('flow-unit', 'flow', 'flow')
  answer('flow-unit', 'plate', 'flow')
  answer('pressure-unit', 'pressure', 'pressure')
  return result
}

/** Answers stand where the sheet is silent or doubtful, and over what it says: a person has looked. */
function applyAnswers(raw: RawHeader, answers: SheetAnswers): void {
  const text = (field: keyof SheetAnswers) => {
    const value = answers[field]
    return value === undefined || value.trim() === '' ? null : plainText(value)
  }
  const bench = text('bench')
  if (bench) raw.bench = bench
  const date = text('date')
  if (date) raw.date = readDate(date) ?? raw.date
  const cylinder = text('cylinder')
  if (cylinder) raw.cylinder = readCylinder(cylinder) ?? raw.cylinder
  const side = text('side')
  if (side) raw.side = readSide(side, true) ?? raw.side
  const stage = text('stage')
  if (stage) raw.stage = readStage(stage) ?? raw.stage
  for (const field of ['valve', 'stem'] as const) {
    const answer = text(field)
    const length = answer ? readHeaderNumber(answer, 'length', undefined) : null
    if (length) raw.lengths[field] = length
  }
  const pressure = text('pressure')
  if (pressure) raw.pressure = readHeaderNumber(pressure, 'pressure', undefined) ?? raw.pressure
  const unit = text('pressure-unit')
  if (unit && raw.pressure && raw.pressure.unit === null) raw.pressure = { ...raw.pressure, unit: findUnitWord(unit, 'pressure')?.unit ?? null }
  const scale = text('full-scale')
  if (scale) raw.fullScale = { table: readFullScale(scale, undefined), unit: findUnitWord(scale, 'flow')?.unit ?? null, pressurePa: null }
  const nominal = text('plate-nominal')
  if (nominal) raw.plateNominal = readHeaderNumber(nominal, 'flow', undefined) ?? raw.plateNominal
}

function airOf(raw: RawHeader): number | null {
  if (raw.density !== null) return raw.density
  if (raw.temperatureC === null || raw.barometerHpa === null) return null
  try {
    // Half-damp air where the sheet gives no humidity: the whole range is worth 0.4 % of flow.
    return airDensity({ temperatureC: raw.temperatureC, pressurePa: raw.barometerHpa * 100, relativeHumidity: (raw.humidity ?? 50) / 100 }).densityKgPerM3
  }
  catch {
    return null
  }
}

function fullScaleOf(raw: RawHeader, profile: BenchProfile | null, density: number): Record<string, number> | null {
  if (raw.fullScale && Object.keys(raw.fullScale.table).length > 0) {
    const unit: SheetUnit | null = raw.fullScale.unit ?? raw.flowUnit
    if (unit !== null) return Object.fromEntries(Object.entries(raw.fullScale.table).map(([name, value]) => [name, toCfm(value, unit, density)]))
  }
  return profile?.fullScaleCfm ?? null
}

function leakOf(raw: RawHeader, fullScale: Record<string, number> | null, density: number, series: readonly RawSeries[]): number | null {
  const { leak } = raw
  if (!leak) return null
  if (leak.unit === 'percent' || leak.unit === 'thousandths') {
    // Of the range the lowest lift was read on, or of that reading where the bench has no ranges.
    const lowest = series[0]?.points[0]
    const scale = fullScale ? Math.min(...Object.values(fullScale)) : null
    const own = lowest && lowest.fraction ? lowest.flowCfm / lowest.fraction : scale
    return own === null ? null : Math.max(0, leak.value / (leak.unit === 'percent' ? 100 : 1000) * own)
  }
  const unit = leak.unit ?? raw.flowUnit
  if (unit === null) return leak.value === 0 ? 0 : null
  return Math.max(0, toCfm(leak.value, unit, density))
}

function closeHeader(raw: RawHeader, profile: BenchProfile | null, series: readonly RawSeries[], pressurePa: number | null): { header: SheetHeader, findings: SheetFinding[], needs: SheetNeed[] } {
  const findings: SheetFinding[] = []
  const needs: SheetNeed[] = []
  const millimetres = (field: 'valve' | 'stem' | 'throat' | 'land') => positive(inUnit(raw.lengths[field] ?? null, 'mm'))
  const sizes = { valve: millimetres('valve'), stem: millimetres('stem') }
  for (const [field, name] of [['valve', 'valve head diameter'], ['stem', 'stem diameter']] as const) {
    const written = raw.lengths[field]
    if (sizes[field] === null) needs.push({ field, question: written ? `The ${name} is written as ${written.value} without a unit. What is it, with its unit?` : `What is the ${name}, with its unit?` })
    if (written?.nominal) findings.push({ code: 'nominal-size', severity: 'note', lifts: [], text: `The ${name} is quoted as a nominal size (${sizes[field]?.toFixed(2) ?? ''} mm), not measured.` })
  }
  if (raw.bench === null) needs.push({ field: 'bench', question: 'Which bench was this run on?' })
  if (raw.stage === null) needs.push({ field: 'stage', question: 'Which stage is this sheet of: baseline, after bowl, after port, after short turn or final?' })
  if (raw.date === null) needs.push({ field: 'date', question: 'On what date was this run?' })
  if (raw.date?.kind === 'ambiguous') {
    const [one, other] = raw.date.either
    findings.push({ code: 'ambiguous-date', severity: 'ask', lifts: [], text: `"${raw.date.found}" can be ${one} or ${other}.` })
    needs.push({ field: 'date', question: `Is "${raw.date.found}" ${one} or ${other}?` })
  }
  const today = plateToday(raw)
  const nominal = raw.plateNominal ?? (profile?.plateNominal ? { value: profile.plateNominal.value, unit: profile.plateNominal.unit, nominal: true, end: 0 } : null)
  let plateRatio = 1
  if (today !== null && nominal === null) needs.push({ field: 'plate-nominal', question: 'The sheet gives a plate reading. What is the plate\'s nominal flow, with its unit?' })
  else if (today !== null && nominal !== null) {
    const same = today.unit === null || nominal.unit === null || today.unit === nominal.unit
    const inCfm = (flow: { value: number, unit: SheetUnit | null }) => same || flow.unit === null ? flow.value : toCfm(flow.value, flow.unit, referenceBasis.densityKgPerM3)
    const ratio = inCfm(today) / inCfm(nominal)
    // Half or double is no bench: the two figures are not of one plate, or one is not a plate reading.
    if (ratio > 0.5 && ratio < 2) plateRatio = ratio
    else findings.push({ code: 'plate-out', severity: 'refuse', lifts: [], text: `The plate reads ${today.value} against a nominal of ${nominal.value}: those two cannot be of one plate in one unit. Check both.` })
  }
  const plateGiven = plateRatio !== 1 || (today !== null && nominal !== null && today.value === nominal.value)
  const row = series[0]?.points[0]?.rowPressurePa ?? null
  return {
    findings,
    needs,
    header: {
      bench: raw.bench,
      date: raw.date?.kind === 'date' ? raw.date.iso : null,
      operator: raw.operator,
      head: raw.head,
      stage: raw.stage,
      valveMm: sizes.valve,
      stemMm: sizes.stem,
      seatDeg: raw.seatDeg,
      throatMm: millimetres('throat'),
      landMm: millimetres('land'),
      entry: raw.entry,
      pipe: raw.pipe,
      pressurePa: pressurePa ?? row,
      temperatureC: raw.temperatureC,
      barometerHpa: raw.barometerHpa,
      humidity: raw.humidity,
      airDensity: airOf(raw) ?? referenceBasis.densityKgPerM3,
      leakCfm28: null,
      plateRatio,
      plateGiven,
    },
  }
}

/** Plate today: one reading, or the mean of before and after. */
function plateToday(raw: RawHeader): { value: number, unit: SheetUnit | null } | null {
  const [first] = raw.plateToday
  if (!first) return null
  const alike = raw.plateToday.filter(reading => reading.unit === first.unit)
  return { value: alike.reduce((sum, reading) => sum + reading.value, 0) / alike.length, unit: first.unit }
}

function portNeeds(series: readonly RawSeries[], raw: RawHeader): SheetNeed[] {
  const needs: SheetNeed[] = []
  if (raw.cylinder === null && (series.length === 0 || series.some(one => one.cylinder === null))) needs.push({ field: 'cylinder', question: 'Which cylinder is this sheet of?' })
  if (raw.side === null && (series.length === 0 || series.some(one => one.side === null))) needs.push({ field: 'side', question: 'Is this the intake or the exhaust?' })
  return needs
}

/** Null for a size or pressure that is nothing or less. */
function positive(value: number | null): number | null {
  return value !== null && value > 0 && Number.isFinite(value) ? value : null
}

function toWire({ heading_: _, ...column }: ReadColumn): SheetColumn {
  return column
}
