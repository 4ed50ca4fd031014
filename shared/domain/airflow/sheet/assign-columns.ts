import type { Heading } from './heading-words'
import { unitKinds } from './heading-words'
import type { FoundTable } from './find-table'
import { readCell } from './read-cell'
import { findUnitWord } from './unit-words'
import { unitTable } from '../../units/unit-table'
import type { BenchProfile, ColumnChoices, SheetColumn, SheetUnit } from './sheet-reading'

/** A column with what its heading says beside the wire fields. */
export interface ReadColumn extends SheetColumn { heading_: Heading }

/** Columns that belong to one run side by side: one flow or reading, and what goes with it. */
export interface ColumnGroup {
  run: string | null
  cylinder: number | null
  side: SheetColumn['side']
  /** Flow as read, in preference order: a reading on a range, a raw flow, a flow at 28. */
  flow: ReadColumn | null
  reading: ReadColumn | null
  range: ReadColumn | null
  pressure: ReadColumn | null
  leak: ReadColumn | null
}

/**
 * Gives every column its quantity, unit and run.
 *
 * Unit and meaning come from the heading (or the units row joined to it), then from the cells ("22.8 cfm"), then from what a person
 * chose or the bench profile says; a choice overrides everything.
 */
export function assignColumns(table: FoundTable, choices: ColumnChoices, profile: BenchProfile | null, headerUnits: { lift: SheetUnit | null, flow: SheetUnit | null }): ReadColumn[] {
  return table.headings.flatMap((heading, index) => {
    const choice = choices[String(index)]
    const known = table.meanings[index] ?? null
    const fromProfile = profile ? profileColumn(profile, heading) ?? onlyColumnOf(profile, known?.quantity) : null
    const quantity = choice?.quantity ?? known?.quantity ?? fromProfile?.quantity
    if (!quantity) return []
    const meaning: Heading = known ?? { quantity, unit: null, run: null, cylinder: null, side: null, statistic: null, basis: null, densityDone: false, pressure: null }
    const fromCells = unitInCells(table, index, quantity)
    const fromHeader = quantity === 'lift' ? headerUnits.lift : quantity === 'flow' ? headerUnits.flow : null
    const [unit, unitFrom] = choice?.unit && fitsQuantity(choice.unit, quantity)
      ? [choice.unit, 'choice' as const]
      : known?.unit
        ? [known.unit, 'heading' as const]
        : fromCells
          ? [fromCells, 'cells' as const]
          : fromHeader
            ? [fromHeader, 'heading' as const]
            : fromProfile?.unit ? [fromProfile.unit, 'profile' as const] : [null, null]
    return [{ index, heading, quantity, unit, unitFrom, run: meaning.run, cylinder: meaning.cylinder, side: meaning.side, heading_: { ...meaning, quantity } }]
  })
}

/** What the profile says of a heading, compared without case, spaces and signs. */
export function profileColumn(profile: BenchProfile, heading: string): { quantity: Heading['quantity'], unit: SheetUnit | null } | null {
  const fold = (text: string) => text.toLowerCase().replace(/[^\p{L}\d]/gu, '')
  const name = Object.keys(profile.columns).find(key => fold(key) === fold(heading))
  return name === undefined ? null : profile.columns[name] ?? null
}

/** Whether a unit is of a kind the quantity can be in; a choice that is not is passed over, and the question stays. */
function fitsQuantity(unit: SheetUnit, quantity: Heading['quantity']): boolean {
  return (unitKinds[quantity] ?? []).some((kind) => {
    if (unit === 'percent' || unit === 'thousandths') return kind === 'ratio'
    if (unit === 'lift/diameter') return kind === 'length'
    if (!Object.hasOwn(unitTable, unit)) return false
    const { dimension } = unitTable[unit]
    return kind === 'flow' ? dimension === 'volume-flow' || dimension === 'mass-flow' : dimension === kind
  })
}

/** A bench that always writes one unit for a quantity writes it under a shorter heading too. */
function onlyColumnOf(profile: BenchProfile, quantity: Heading['quantity'] | undefined): { quantity: Heading['quantity'], unit: SheetUnit | null } | null {
  const alike = Object.values(profile.columns).filter(column => column.quantity === quantity)
  return alike.length === 1 ? alike[0] ?? null : null
}

function unitInCells(table: FoundTable, index: number, quantity: Heading['quantity']): SheetUnit | null {
  const kinds = unitKinds[quantity] ?? []
  const units = new Set<SheetUnit>()
  for (const { cells } of table.rows) {
    const cell = readCell(cells[index] ?? '', undefined)
    if (cell.kind !== 'number' || cell.beside === '') continue
    for (const kind of kinds) {
      const found = findUnitWord(` ${cell.beside}`, kind)
      if (found) units.add(found.unit)
    }
  }
  const [only] = units
  return units.size === 1 && only ? only : null
}

/** Sorts the columns into runs side by side. Columns without a run of their own serve all of them. */
export function groupColumns(columns: readonly ReadColumn[]): ColumnGroup[] {
  const carrying = columns.filter(column => (column.quantity === 'flow' || column.quantity === 'reading') && column.heading_.statistic !== 'extreme')
  const single = carrying.filter(column => column.heading_.statistic !== 'mean')
  // A mean is only read where nothing it is the mean of stands beside it.
  const used = single.length > 0 ? single : carrying
  const keyOf = (column: SheetColumn) => [column.run, column.cylinder, column.side].join('|')
  const keys = [...new Set(used.map(keyOf))]
  const groups = keys.flatMap((key) => {
    const own = used.filter(column => keyOf(column) === key)
    const flows = own.filter(column => column.quantity === 'flow')
    const readings = own.filter(column => column.quantity === 'reading')
    // Several flows under one name: raw and brought to 28 are one run; otherwise they are repeats without a label.
    const raw = flows.filter(column => column.heading_.basis !== 'at28')
    const plainRepeats = raw.length > 1 && readings.length === 0 ? raw : null
    if (plainRepeats) return plainRepeats.map((flow, i) => ({ ...emptyGroup(flow), run: String(i + 1), flow }))
    const [first] = own
    if (!first) return []
    return [{ ...emptyGroup(first), reading: readings[0] ?? null, flow: raw[0] ?? flows[0] ?? null }]
  })
  for (const quantity of ['pressure', 'range', 'leak'] as const) {
    const found = columns.filter(column => column.quantity === quantity && column.heading_.statistic === null)
    const unlabelled = found.filter(column => column.run === null && column.cylinder === null && column.side === null)
    groups.forEach((group, i) => {
      const labelled = found.find(column => !unlabelled.includes(column) && column.run === (group.flow ?? group.reading)?.run && column.cylinder === group.cylinder && column.side === group.side)
      // As many unlabelled ones as runs go with them in order; a single one is shared.
      const paired = unlabelled.length === groups.length ? unlabelled[i] : unlabelled[0]
      group[quantity] = labelled ?? paired ?? null
    })
  }
  return groups
}

function emptyGroup(column: ReadColumn): ColumnGroup {
  return { run: column.run, cylinder: column.cylinder, side: column.side, flow: null, reading: null, range: null, pressure: null, leak: null }
}
