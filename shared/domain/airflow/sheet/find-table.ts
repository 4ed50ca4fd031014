import { type Heading, isUnitCell, readHeading } from './heading-words'
import { plainText } from './plain-text'
import { readCell } from './read-cell'
import type { ColumnChoices, SheetTable } from './sheet-reading'

/** The table of a sheet: what each column's heading says, and which rows are numbers. */
export interface FoundTable {
  /** Joined heading of each column, as shown. */
  headings: string[]
  meanings: (Heading | null)[]
  /** Data rows as plain text, in file order, each with the label of the run it stands under. */
  rows: { cells: string[], runLabel: string | null, cylinder: number | null }[]
  /** Everything that is not the table: the header, wherever it stands. */
  rest: string[][]
  kind: 'flow' | 'plate-log'
}

/**
 * Finds the table by its headings: one to three rows under which a lift and a flow stand, with numbers below; or a date and a plate.
 *
 * A label in an upper row spans the columns up to the next label. A row of units below belongs to the headings. The table ends
 * where its numbers do; the same headings again, or a line that names a run or cylinder, starts the next block. Rows of totals and
 * means are left out. A table laid on its side (lifts along a row) is turned first.
 * What a person chose for a column goes before its heading. Null when no table is found.
 */
export function findTable(table: SheetTable, decimal: '.' | ',' | undefined, profileHeading?: (text: string) => Heading | null, choices: ColumnChoices = {}): FoundTable | null {
  const rows = table.rows.map(row => row.map(plainText))
  const meaning: Meaning = (text, index) => {
    const read = profileHeading?.(text) ?? readHeading(text)
    const quantity = choices[String(index)]?.quantity
    return quantity === undefined || quantity === read?.quantity ? read : { ...nothingMore, quantity }
  }
  const start = findHeadings(rows, decimal, meaning)
  if (!start) {
    const turned = turnTable(rows, decimal)
    return turned ? findTable({ rows: turned }, decimal, profileHeading, choices) : null
  }
  const { headings, meanings, first, after, kind } = start
  const key = meanings.findIndex(one => one?.quantity === (kind === 'flow' ? 'lift' : 'date'))
  const found: FoundTable = { headings, meanings, rows: [], rest: rows.slice(0, first), kind }
  let runLabel: string | null = null
  let cylinder: number | null = null
  let ended = false
  for (let at = after; at < rows.length; at++) {
    const cells = rows[at] ?? []
    if (cells.every(cell => cell === '' || /^[-=_]+$/.test(cell))) continue
    const again = sameHeadings(cells, headings)
    if (again) {
      ended = false
      continue
    }
    const keyCell = cells[key] ?? ''
    const isData = kind === 'flow' ? isNumberLike(keyCell, decimal) : /\d/.test(keyCell)
    if (isData && !ended && cells.some(cell => isNumberLike(cell, decimal))) {
      found.rows.push({ cells, runLabel, cylinder })
      continue
    }
    const text = cells.filter(cell => cell !== '').join(' ')
    if (/^(?:total|sum|mean|average|avg|min|max|spread|sd|std|s\.d\.|count|n\s*=|gain|diff)/i.test(text)) continue
    const run = /^\W*(?:run|repeat|set-?up|pass|sweep|trial)\W*(?:no\.?\s*)?(\d{1,2}|[a-c]|down|up)\b/i.exec(text)
    const cyl = /^\W*cyl(?:inder)?\W*(\d{1,2})\b/i.exec(text)
    // A name over a block has numbers under it; "Cylinder: 2" among other lines is header.
    const below = firstFilled(rows, at + 1)
    const overBlock = below !== null && (sameHeadings(rows[below] ?? [], headings) || (kind === 'flow' && isNumberLike(rows[below]?.[key] ?? '', decimal)))
    if ((run || cyl) && overBlock) {
      if (run) runLabel = (run[1] ?? '').toLowerCase()
      if (cyl) cylinder = Number(cyl[1])
      ended = false
      continue
    }
    // A row of units or words right under a repeated heading is no header line.
    if (cells.filter(cell => cell !== '').every(isUnitCell)) continue
    ended = found.rows.length > 0
    found.rest.push(cells)
  }
  // A label above the first block names its run too.
  const above = found.rest[found.rest.length - 1]?.join(' ') ?? ''
  const firstRun = /^\W*(?:run|repeat|pass|sweep)\W*(\d{1,2}|[a-c])\W*$/i.exec(above)
  if (firstRun && runLabel !== null) found.rows.filter(row => row.runLabel === null).forEach((row) => { row.runLabel = firstRun[1] ?? null })
  const firstCyl = /^\W*cyl(?:inder)?\W*(\d{1,2})\W*$/i.exec(above)
  if (firstCyl && cylinder !== null) found.rows.filter(row => row.cylinder === null).forEach((row) => { row.cylinder = Number(firstCyl[1]) })
  return found.rows.length > 0 ? found : null
}

type Meaning = (text: string, index: number) => Heading | null

/** What a heading says that says nothing but its quantity. */
const nothingMore: Omit<Heading, 'quantity'> = { unit: null, run: null, cylinder: null, side: null, statistic: null, basis: null, densityDone: false, pressure: null }

interface Headings { headings: string[], meanings: (Heading | null)[], first: number, after: number, kind: FoundTable['kind'] }

function findHeadings(rows: string[][], decimal: '.' | ',' | undefined, meaning: Meaning): Headings | null {
  // `last` is the row right above the numbers; as few rows above it are taken as make a heading.
  for (let last = 0; last < rows.length; last++) {
    if (!isHeadingRow(rows[last] ?? [])) continue
    const next = firstFilled(rows, last + 1)
    if (next === null || !(rows[next] ?? []).some(cell => isNumberLike(cell, decimal))) continue
    for (let height = 1; height <= 3 && height <= last + 1; height++) {
      const first = last - height + 1
      const block = rows.slice(first, last + 1)
      if (!block.every(isHeadingRow)) break
      const joined = joinHeadings(block)
      const meanings = joined.map(meaning)
      const kind = kindOf(meanings)
      if (!kind) continue
      const key = meanings.findIndex(one => one?.quantity === (kind === 'flow' ? 'lift' : 'date'))
      const keyCell = rows[next]?.[key] ?? ''
      if (kind === 'flow' ? !isNumberLike(keyCell, decimal) : !/\d/.test(keyCell)) continue
      const above = spanRow(rows[first - 1], block[0] ?? [])
      const headings = above ? joinHeadings([above, ...block]) : joined
      return { headings, meanings: headings.map(meaning), first: above ? first - 1 : first, after: last + 1, kind }
    }
  }
  return null
}

/** Headings are words: at least two cells, none of them a plain number. */
function isHeadingRow(cells: string[]): boolean {
  return cells.filter(cell => cell !== '').length >= 2 && !cells.some(cell => /^[+-]?\d[\d.,]*$/.test(cell))
}

/** A number, or one that can be read two ways: its row is data all the same. */
function isNumberLike(cell: string, decimal: '.' | ',' | undefined): boolean {
  const { kind } = readCell(cell, decimal)
  return kind === 'number' || kind === 'ambiguous'
}

function kindOf(meanings: (Heading | null)[]): FoundTable['kind'] | null {
  const has = (...quantities: Heading['quantity'][]) => meanings.some(one => one !== null && quantities.includes(one.quantity))
  if (has('lift') && has('flow', 'reading')) return 'flow'
  return has('date') && has('plate') && !has('lift') ? 'plate-log' : null
}

/** The row above the headings, if it only names runs, cylinders or sides over them. */
function spanRow(row: string[] | undefined, below: string[]): string[] | null {
  if (!row || row.filter(cell => cell !== '').length === 0 || row.length > below.length + 1) return null
  const labels = row.filter(cell => cell !== '')
  const names = labels.every(cell => /\b(?:run|repeat|rep|set|pass|trial|sweep|cyl(?:inder)?|intake|inlet|exhaust|lift|port|flow|pressure|mean|average|note|remark)\b/i.test(cell) && cell.length <= 24)
  const groups = labels.filter(cell => /\b(?:run|repeat|rep|set|pass|trial|sweep|cyl(?:inder)?)\W*\d|\b(?:intake|inlet|exhaust)\b/i.test(cell))
  return names && groups.length >= 2 ? row : null
}

/** Joins heading rows column by column; a label of an upper row reaches over the empty cells after it, but no further than its fellows do. */
function joinHeadings(block: string[][]): string[] {
  const width = Math.max(...block.map(row => row.length))
  const rows = block.map((row, level) => {
    const filled = Array.from({ length: width }, (_, i) => row[i] ?? '')
    if (level === block.length - 1) return filled
    const labelled = filled.flatMap((cell, i) => cell === '' ? [] : [i])
    const gaps = labelled.slice(1).map((at, i) => at - (labelled[i] as number))
    const reach = gaps.length > 0 ? Math.max(...gaps) : width
    return filled.map((cell, i) => {
      if (cell !== '') return cell
      const from = [...labelled].reverse().find(at => at < i)
      return from !== undefined && i - from < reach && isSpanning(filled[from] ?? '') ? filled[from] ?? '' : ''
    })
  })
  return Array.from({ length: width }, (_, i) => rows.map(row => row[i] ?? '').filter(text => text !== '').join(' '))
}

/** A label that can stand over several columns: it names a run, a cylinder or a side. */
function isSpanning(text: string): boolean {
  return /\b(?:run|repeat|rep|set|set-?up|pass|trial|sweep|test|cyl(?:inder)?)\W*\d|\b(?:intake|inlet|exhaust)\b/i.test(text)
}

function firstFilled(rows: string[][], from: number): number | null {
  for (let at = from; at < Math.min(rows.length, from + 2); at++) {
    if ((rows[at] ?? []).some(cell => cell !== '')) return at
  }
  return null
}

function sameHeadings(cells: string[], headings: string[]): boolean {
  const filled = cells.filter(cell => cell !== '')
  return filled.length >= 2 && filled.every(cell => headings.some(heading => heading === cell || heading.endsWith(` ${cell}`) || heading.startsWith(`${cell} `)))
}

/** Turns a table laid on its side: a row that begins with a lift and goes on in numbers becomes the lift column. Null when there is none. */
function turnTable(rows: string[][], decimal: '.' | ',' | undefined): string[][] | null {
  const numbersIn = (row: string[]) => row.slice(1).filter(cell => readCell(cell, decimal).kind === 'number').length
  const lift = rows.findIndex(row => readHeading(row[0] ?? '')?.quantity === 'lift' && numbersIn(row) >= 4)
  if (lift < 0) return null
  const width = (rows[lift] ?? []).length
  let end = lift + 1
  while (end < rows.length && /[A-Za-z%]/.test(rows[end]?.[0] ?? '') && numbersIn(rows[end] ?? []) >= 3) end++
  if (end === lift + 1) return null
  const block = rows.slice(lift, end)
  const turned = Array.from({ length: width }, (_, i) => block.map(row => row[i] ?? ''))
  return [...rows.slice(0, lift), ['']].concat(turned, [['']], rows.slice(end))
}
