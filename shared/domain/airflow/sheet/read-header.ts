import { convert } from '../../units/convert'
import { findLabels, type HeaderField } from './header-words'
import { plainText } from './plain-text'
import { type DateReading, readDate } from './read-date'
import { type HeaderNumber, inUnit, readCylinder, readFullScale, readHeaderNumber, readSide, readStage } from './read-header-value'
import { findUnitWord, type UnitKind } from './unit-words'
import type { SheetHeader } from '../flow-run'
import type { Side } from '../../units/port'
import type { SheetUnit } from './sheet-reading'

/** The header as written: numbers with their units, nothing brought to the one basis yet. */
export interface RawHeader {
  bench: string | null
  date: DateReading | null
  operator: string | null
  head: string | null
  cylinder: number | null
  side: Side | null
  stage: SheetHeader['stage']
  lengths: Partial<Record<'valve' | 'stem' | 'throat' | 'land', HeaderNumber>>
  seatDeg: number | null
  entry: string | null
  pipe: string | null
  pressure: HeaderNumber | null
  temperatureC: number | null
  barometerHpa: number | null
  humidity: number | null
  density: number | null
  leak: HeaderNumber | null
  /** Pressure the leak's own line names, Pa. */
  leakPressurePa: number | null
  plateNominal: HeaderNumber | null
  plateToday: HeaderNumber[]
  fullScale: { table: Record<string, number>, unit: SheetUnit | null, pressurePa: number | null } | null
  /** What the sheet says of its flow figures. */
  basis: { at28: boolean | null, densityDone: boolean | null }
  liftUnit: SheetUnit | null
  flowUnit: SheetUnit | null
}

const textFields: readonly HeaderField[] = ['entry', 'pipe', 'operator', 'skip', 'bench']
/** Fields whose value is one phrase: what follows a comma speaks of something else. */
const endsWithPhrase: readonly HeaderField[] = ['head', 'cylinder', 'side', 'stage', 'date', 'pressure', 'barometer', 'temperature', 'humidity']
/** What parts one phrase of a sentence from the next; a decimal comma does not. */
const phraseEnd = /[,;](?!\d)|\s{2,}|\s[-/|]\s/
/** Fields whose number may stand in front of their label. */
const numbered: readonly HeaderField[] = ['valve', 'stem', 'throat', 'land', 'seat', 'humidity', 'temperature', 'barometer', 'pressure', 'leak']
const lengthFields = ['valve', 'stem', 'throat', 'land'] as const

/**
 * Reads a header in whatever form it has: label and value in two cells, several such pairs on a line, "label: value" in one
 * cell, or whole sentences. Labels are found by vocabulary, a value is what follows its label up to the next, and what carries
 * no label is known by its form (a date, "20.9 C", "1011 hPa", a head number, "as received").
 */
export function readHeader(rows: readonly string[][], decimal: '.' | ',' | undefined): RawHeader {
  const raw: RawHeader = {
    bench: null, date: null, operator: null, head: null, cylinder: null, side: null, stage: null, lengths: {}, seatDeg: null, entry: null, pipe: null,
    pressure: null, temperatureC: null, barometerHpa: null, humidity: null, density: null, leak: null, leakPressurePa: null, plateNominal: null, plateToday: [],
    fullScale: null, basis: { at28: null, densityDone: null }, liftUnit: null, flowUnit: null,
  }
  const reader = new HeaderReader(raw, decimal)
  for (const row of rows) reader.readRow(row.map(plainText))
  return raw
}

class HeaderReader {
  constructor(private readonly raw: RawHeader, private readonly decimal: '.' | ',' | undefined) {}

  readRow(cells: string[]): void {
    for (let i = 0; i < cells.length; i++) {
      const cell = cells[i] ?? ''
      if (cell === '' || /^-+$/.test(cell)) continue
      const next = cells[i + 1] ?? ''
      const label = labelOnly(cell)
      if (label === 'full-scale') {
        // Its ranges may each have a cell: "Full scale | A = 28 cfm | B = 55 cfm".
        const whole = cells.slice(i).filter(one => one !== '').join('; ')
        this.assign('full-scale', whole, whole)
        return
      }
      const range = /^(?:range|scale)\s+([A-Z]|\d{1,2})\b(?:\s*full[\s-]*scale)?/i.exec(cell)
      if (range && next !== '') {
        const whole = `${range[1] ?? ''} = ${next} ${cell.slice(range[0].length)}`
        this.assign('full-scale', whole, whole)
        i++
        continue
      }
      if (label !== null && next !== '' && (labelOnly(next) === null || textFields.includes(label) || ['stage', 'side', 'basis'].includes(label))) {
        this.readPair(label, cell.replace(/[:=\s]+$/, ''), next)
        i++
        continue
      }
      const inside = /^([^:=]{2,40})[:=]\s*(.+)$/.exec(cell)
      const insideLabel = inside ? labelOnly(inside[1] ?? '') : null
      if (inside && insideLabel !== null && insideLabel !== 'full-scale') this.readPair(insideLabel, inside[1] ?? '', inside[2] ?? '')
      else this.readLoose(cell)
      // "Plate 70,80 l/s at 2,50 kPa | 71,46": the bare number beside a nominal is today's.
      if (this.raw.plateNominal && this.raw.plateToday.length === 0 && /\bplate\b/i.test(cell) && /^[+-]?[\d.,' ]+$/.test(next)) {
        const today = readHeaderNumber(next, 'flow', this.decimal)
        if (today) this.raw.plateToday.push({ ...today, unit: this.raw.plateNominal.unit })
        i++
      }
    }
  }

  private readPair(field: HeaderField, label: string, value: string): void {
    if (textFields.includes(field)) {
      this.assign(field, value, value)
      return
    }
    if (field === 'air') {
      this.readLoose(value)
      return
    }
    // A value may hold further labels: "DNK-0152 cyl 1", "1.614 in, stem 5/16".
    const labels = ['head', ...lengthFields, 'seat', 'side', 'stage', 'cylinder'].includes(field) ? findLabels(value).filter(inner => inner.field !== field && inner.start > 0 && inner.field !== 'skip') : []
    const inner = field === 'stage' || field === 'side' ? [] : labels
    const own = value.slice(0, inner[0]?.start ?? value.length)
    this.assign(field, `${label} ${own}`, own)
    inner.forEach((found, at) => this.assign(found.field, value.slice(found.start, inner[at + 1]?.start ?? value.length), value.slice(found.end, inner[at + 1]?.start ?? value.length)))
  }

  private readLoose(cell: string): void {
    const bench = /(?:^|\b(?:on|at)\s+)(?:the\s+)?([A-Za-z][\w-]*)\s+(?:flow\s*)?bench\b/i.exec(cell)
    if (bench && this.raw.bench === null && !/^(?:flow|test|air|this|our|same|the)$/i.test(bench[1] ?? '')) {
      this.raw.bench = titleCase(bench[1] ?? '')
      this.readLoose(`${cell.slice(0, bench.index)}, ${cell.slice(bench.index + bench[0].length)}`.replace(/^,\s*/, ''))
      return
    }
    const by = /\bby\s+((?:\p{Lu}\.\s?)+\p{Lu}[\p{L}'-]+)/u.exec(cell)
    if (by) this.raw.operator ??= by[1] ?? null
    const labels = findLabels(cell)
    const first = labels[0]
    this.readUnlabelled(cell.slice(0, first?.start ?? cell.length))
    // "41 mm valve, 8 mm stem" has each number in front of its label.
    const last = labels[labels.length - 1]
    const numbersFirst = first !== undefined && last !== undefined && labels.every(({ field }) => field === 'seat' || (lengthFields as readonly string[]).includes(field))
      && /\d\s*(?:mm|in|inch(?:es)?|"|deg|°)?\s*$/i.test(cell.slice(0, first.start)) && !/\d/.test(cell.slice(last.end))
    const lengthUnits = new Set([...cell.matchAll(/\d\s*(mm|in|inch(?:es)?|")(?![a-z])/gi)].map(match => findUnitWord(match[1] ?? '', 'length')?.unit))
    labels.forEach((found, at) => {
      const end = labels[at + 1]?.start ?? cell.length
      let value = numbersFirst ? cell.slice(labels[at - 1]?.end ?? 0, found.start) : cell.slice(found.end, end)
      // "45 deg seat", "55 % humidity": the number may stand in front of its label.
      const before = cell.slice(labels[at - 1]?.end ?? 0, found.start).split(phraseEnd).pop() ?? ''
      if (!/\d/.test(value) && /\d/.test(before) && numbered.includes(found.field)) value = before
      // A text value in a sentence ends with its phrase.
      let rest = ''
      if (textFields.includes(found.field) || endsWithPhrase.includes(found.field)) {
        const stop = phraseEnd.exec(value.replace(/^[\s:=]+/, match => '_'.repeat(match.length)))
        if (stop) [value, rest] = [value.slice(0, stop.index), value.slice(stop.index + stop[0].length)]
      }
      this.assign(found.field, cell.slice(found.start, found.end) + value, value.replace(/^[\s:=,-]+/, '').trim())
      if (rest !== '') this.readUnlabelled(rest)
    })
    // "valve 41.0 stem 8.0 seat 45 throat 36.3 mm": one unit at the end serves the whole phrase.
    const [only] = lengthUnits
    if (lengthUnits.size === 1 && only) {
      for (const { field } of labels) {
        const length = lengthFields.find(name => name === field)
        const number = length ? this.raw.lengths[length] : undefined
        if (length && number && number.unit === null) this.raw.lengths[length] = { ...number, unit: only }
      }
    }
  }

  /** Text without a label: known by its form alone. */
  private readUnlabelled(text: string): void {
    if (text.trim() === '') return
    const { raw } = this
    let rest = text
    const date = readDate(rest)
    if (date && raw.date === null) {
      raw.date = date
      rest = rest.replace(date.found, ' ')
    }
    // "20.3 C  1006 hPa  46 %" one number after another.
    for (const part of rest.split(/\s{2,}|;|,(?!\d)|\/|\band\b/)) this.readMeasure(part.trim())
    const head = /\b[A-Z]{2,5}-?\d{2,6}\b/.exec(rest)
    if (head && raw.head === null) {
      raw.head = head[0]
      const slash = /^\s*[/]\s*(?:cyl\.?\s*)?(\d{1,2})\b/i.exec(rest.slice(head.index + head[0].length))
      if (slash && raw.cylinder === null) raw.cylinder = readCylinder(slash[1] ?? '')
    }
    for (const part of rest.split(phraseEnd).map(piece => piece.trim()).filter(piece => piece !== '')) {
      const side = readSide(part, true)
      if (side && raw.side === null && part.split(' ').length <= 4) raw.side = side
      const stage = part.split(' ').length <= 5 ? readStage(part) : null
      // "port" alone may only name the iron; "after port" or "ported" is work.
      if (stage && raw.stage === null) raw.stage = stage
      if (raw.operator === null && /^(?:by\s+)?(?:\p{Lu}\.\s?)+\p{Lu}\p{L}+$/u.test(part)) raw.operator = part.replace(/^by\s+/i, '')
    }
  }

  private readMeasure(text: string): void {
    const { raw } = this
    if (!/\d/.test(text)) return
    const water = readHeaderNumber(text, 'pressure', this.decimal)
    if (water?.unit) {
      const pascals = inUnit(water, 'Pa') ?? 0
      if (pascals > 80_000 && pascals < 120_000) raw.barometerHpa ??= pascals / 100
      else if (pascals > 0 && pascals < 15_000) raw.pressure ??= water
      return
    }
    if (/(?<![A-Za-z\d.,-])[+-]?\d[\d.,]*\s*(?:°|deg)?\s*[CFK]\b/i.test(text)) raw.temperatureC ??= inUnit(readHeaderNumber(text, 'temperature', this.decimal), 'degC')
    else if (/^\W*[\d.,]+\s*%/.test(text)) raw.humidity ??= percentOf(readHeaderNumber(text, 'ratio', this.decimal))
  }

  private assign(field: HeaderField, whole: string, value: string): void {
    const { raw, decimal } = this
    const number = (kind: UnitKind) => readHeaderNumber(whole, kind, decimal)
    const has = value.trim() !== '' && !/^(?:-+|\?)$/.test(value.trim())
    switch (field) {
      case 'valve': case 'stem': case 'throat': case 'land': {
        const length = number('length')
        if (length && raw.lengths[field] === undefined) raw.lengths[field] = length
        return
      }
      case 'seat': {
        const found = readHeaderNumber(value, 'length', decimal)
        // A seat of 45 is an angle; a seat of 1.65 is a width.
        if (found && found.value >= 15 && found.value <= 60 && (found.unit === null || /°|deg/i.test(value))) raw.seatDeg ??= found.value
        else if (found && found.unit !== null && raw.lengths.land === undefined) raw.lengths.land = found
        return
      }
      case 'bench':
        if (has && raw.bench === null) raw.bench = titleCase(value.replace(/\s*\bbench\b.*$/i, '').trim() || value)
        return
      case 'operator':
        if (has && raw.operator === null) raw.operator = value.trim()
        return
      case 'entry':
        if (raw.entry === null && value.trim() !== '') raw.entry = value.trim()
        return
      case 'pipe':
        if (raw.pipe === null && value.trim() !== '') raw.pipe = value.trim()
        return
      case 'head': {
        const head = /\b[A-Za-z]{1,5}(?:-\d{1,6}|\d{2,6})\b|\b\d{3,6}\b/.exec(value)
        if (head && raw.head === null) {
          raw.head = head[0]
          const slash = /^\s*\/\s*(?:cyl\.?\s*)?(\d{1,2})\b/i.exec(value.slice(head.index + head[0].length))
          if (slash && raw.cylinder === null) raw.cylinder = readCylinder(slash[1] ?? '')
        }
        return
      }
      case 'cylinder':
        raw.cylinder ??= readCylinder(value)
        return
      case 'side': {
        raw.side ??= readSide(value, true)
        return
      }
      case 'stage':
        raw.stage ??= readStage(value)
        return
      case 'date':
        raw.date ??= readDate(value)
        return
      case 'pressure': {
        const pressure = number('pressure')
        if (pressure && raw.pressure === null) raw.pressure = pressure
        return
      }
      case 'temperature':
        raw.temperatureC ??= inUnit(withDefault(number('temperature'), 'degC', value => value > -30 && value < 50), 'degC')
        return
      case 'barometer':
        raw.barometerHpa ??= barometer(number('pressure'))
        return
      case 'humidity':
        raw.humidity ??= percentOf(number('ratio'))
        return
      case 'density':
        raw.density ??= density(number('density'))
        return
      case 'air':
        this.readUnlabelled(value)
        return
      case 'leak': {
        const flow = number('flow')
        const share = number('ratio')
        const leak = flow?.unit ? flow : share?.unit ? share : flow
        if (leak && raw.leak === null) {
          raw.leak = leak
          const at = /(?:\bat\b|@)\s*(.*)$/i.exec(value)
          raw.leakPressurePa = at ? inUnit(readHeaderNumber(at[1] ?? '', 'pressure', decimal), 'Pa') : null
        }
        return
      }
      case 'plate-nominal':
        raw.plateNominal ??= number('flow')
        return
      case 'plate-today': case 'plate-before': case 'plate-after': {
        const reading = number('flow')
        if (reading) raw.plateToday.push(reading)
        return
      }
      case 'plate':
        this.readPlate(whole)
        return
      case 'full-scale': {
        const table = readFullScale(whole, decimal)
        const at = /(?:\bat\b|@)\s*([^:;]*)/i.exec(whole)
        const single = Object.keys(table).length === 0 ? readHeaderNumber(whole.replace(/(?:\bat\b|@).*$/i, ''), 'flow', decimal) : null
        if (single?.unit) table[''] = single.value
        if (Object.keys(table).length > 0) {
          raw.fullScale = { table: { ...table, ...raw.fullScale?.table }, unit: raw.fullScale?.unit ?? findUnitWord(whole, 'flow')?.unit ?? null, pressurePa: at ? inUnit(readHeaderNumber(at[1] ?? '', 'pressure', decimal), 'Pa') : null }
        }
        return
      }
      case 'basis':
        raw.flowUnit ??= /\d/.test(value.replace(/m3|ft3/gi, '')) ? null : findUnitWord(value, 'flow')?.unit ?? null
        this.readBasis(whole)
        return
      case 'lift-unit':
        raw.liftUnit ??= findUnitWord(whole.replace(/\blifts?\s+(?:units?|given\s+in|in)\b/i, ''), 'length')?.unit ?? null
        return
      case 'flow-unit':
        raw.flowUnit ??= findUnitWord(value, 'flow')?.unit ?? null
        return
      case 'skip':
        return
    }
  }

  /** A plate line in one cell: nominal first, today's after it, unless words say otherwise; "at 2,50 kPa" is the plate's own pressure. */
  private readPlate(whole: string): void {
    const { raw, decimal } = this
    const text = whole.replace(/(?:\bat\b|@)\s*[\d.,]+\s*(?:in(?:ch(?:es)?)?\s*h2o|"\s*h2o|mm\s*h2o|cm\s*h2o|k?pa|hpa|mbar)/gi, ' ').replace(/\b[A-Z]-?\d+\b/, ' ')
    const unit = findUnitWord(text, 'flow')?.unit ?? null
    const numbers: HeaderNumber[] = []
    let rest = text
    for (let round = 0; round < 3; round++) {
      const found = readHeaderNumber(rest, 'flow', decimal)
      if (!found) break
      numbers.push({ ...found, unit: found.unit ?? unit })
      rest = rest.slice(found.end)
    }
    const [first, second] = numbers
    if (!first) return
    const todayFirst = /(?:today|reads?|now)\D*\d/i.test(text) && /(?:nominal|against|of|for|should)\D*\d/i.test(text) && text.search(/today|reads?|now/i) < text.search(/nominal|against|\bof\b|\bfor\b|should/i)
    if (!second) {
      if (raw.plateNominal === null) raw.plateNominal = first
      else raw.plateToday.push(first)
      return
    }
    raw.plateNominal ??= todayFirst ? second : first
    if (raw.plateToday.length === 0) raw.plateToday.push(todayFirst ? first : second)
  }

  private readBasis(text: string): void {
    const { basis } = this.raw
    const negated = /\b(?:not|un|nothing|never|no)\b[\s-]*(?:\w+\s+){0,3}?(?:brought|corrected|converted|correction)|\buncorrected\b|\bas\s+read\b|\bactual\b|\braw\b/i.test(text)
    if (negated) {
      basis.at28 ??= false
      basis.densityDone ??= /\bactual\b|density|standard/i.test(text) ? false : null
      return
    }
    if (/(?:brought|corrected|converted|reduced|given|stated|shown)\b.*\b28\b|\bat\s+28\b|@\s*28\b/i.test(text)) basis.at28 ??= true
    if (/\bdensity\b.*\b(?:corr\w*|done|yes)|\bcorr\w*\b.*\bdensity\b|\bstandard\s+(?:air|volume|density|flow)\b|\bscfm\b|\bstandard\b/i.test(text)) basis.densityDone ??= true
  }
}

/** The field of a cell that is a label and nothing else: words and a unit, no figures of its own. Null when it is not. */
function labelOnly(cell: string): HeaderField | null {
  const labels = findLabels(cell)
  const [first] = labels
  if (!first || cell.length > 60) return null
  const withoutUnit = cell.replace(/h2o|m3|ft3|\b(?:at|@)\s*28\b/gi, ' ')
  if (/\d/.test(withoutUnit)) return null
  // What is left beside the label must be unit and filling words, or the cell is a sentence.
  const rest = [...labels].reverse().reduce((text, { start, end }) => `${text.slice(0, start)} ${text.slice(end)}`, cell)
  const words = rest.split(/[^\p{L}]+/u).filter(word => word !== '')
  if (words.length > 4) return null
  if (first.field === 'bench' && first.start > 0) return null
  if (/^[^:]+:\s*\S/.test(cell)) return null
  // Side and stage words beside a label are its value: "INTAKE port", "plate ok".
  if (words.some(word => /^(?:intake|inlet|exhaust|received|baseline|done|ok|none|steady)$/i.test(word))) return null
  return labels.find(label => label.field !== 'skip')?.field ?? 'skip'
}

function withDefault(number: HeaderNumber | null, unit: SheetUnit, plausible: (value: number) => boolean): HeaderNumber | null {
  return number && number.unit === null && plausible(number.value) ? { ...number, unit } : number
}

/** Barometers in use read in ranges that do not meet, so a missing unit is no guess: 850 to 1100 is hPa, 85 to 110 kPa, 25 to 32 inHg, 640 to 825 mmHg. */
function barometer(number: HeaderNumber | null): number | null {
  if (!number) return null
  const { value } = number
  const unit = number.unit ?? (value > 850 && value < 1100 ? 'hPa' : value > 85 && value < 110 ? 'kPa' : value > 25 && value < 32 ? 'inHg' : value > 640 && value < 825 ? 'mmHg' : null)
  if (unit === null) return null
  const hPa = inUnit({ ...number, unit }, 'hPa')
  return hPa !== null && hPa > 500 && hPa < 1200 ? hPa : null
}

/** Humidity in per cent; 0.48 without a unit is a share. */
function percentOf(number: HeaderNumber | null): number | null {
  if (!number || number.value < 0 || number.value > 100) return null
  return number.unit === null && number.value > 0 && number.value <= 1 ? 100 * number.value : number.value
}

function density(number: HeaderNumber | null): number | null {
  if (!number) return null
  const value = number.unit === null ? number.value : convert(number.value, number.unit, 'kg/m3')
  return value > 0.6 && value < 1.6 ? value : null
}

function titleCase(text: string): string {
  return text.trim().split(' ').map(word => /^[A-Z]{2,}$|^[a-z]+$/.test(word) ? word[0]?.toUpperCase() + word.slice(1).toLowerCase() : word).join(' ')
}
