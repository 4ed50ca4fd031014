import Papa from 'papaparse'
import { z } from 'zod'
import { Refusal } from '#server/utils/refusal'
import { someText } from '#shared/contract/text'

export interface RosterRow { line: number, name: string, email: string, sponsor: string, problems: string[] }

const columns = ['name', 'email', 'sponsor'] as const
const mostRows = 200
/** What a spreadsheet would run as a formula (OWASP, "CSV injection"). */
const formula = /^[=+\-@\t\r]/
const name = someText(120)
const email = z.string().trim().toLowerCase().email().max(254)

/**
 * Rows of a list as people keep it: comma, semicolon or tab between, the first line names the columns. Each row with what is wrong with it;
 * `line` counts as an editor does. Blank lines are passed over.
 *
 * @throws {Refusal} roster_unreadable when it has no such first line, no row, or more than 200
 */
export function readRoster(csv: string): RosterRow[] {
  const parsed = Papa.parse<string[]>(csv.replace(/^\uFEFF/, ''), { skipEmptyLines: false, delimitersToGuess: [',', ';', '\t'] })
  const rows = withLines(parsed.data, csv)
  const [header, ...body] = rows.filter(row => row.cells.some(cell => cell.trim() !== ''))
  const headings = header?.cells.map(cell => cell.trim().toLowerCase()) ?? []
  const at = Object.fromEntries(columns.map(column => [column, headings.indexOf(column)])) as Record<typeof columns[number], number>
  if (at.name < 0 || at.email < 0 || body.length === 0) throw new Refusal('roster_unreadable')
  if (body.length > mostRows) throw new Refusal('roster_unreadable', `The list has ${body.length} rows. Take it in parts of at most ${mostRows}.`)

  const seen = new Map<string, number>()
  return body.map(({ cells, line }) => {
    const cell = (column: typeof columns[number]) => cells[at[column]] ?? ''
    const problems: string[] = []
    for (const column of columns) if (formula.test(cell(column))) problems.push(`The ${column} begins with a sign that a spreadsheet runs as a formula.`)
    if (cells.length > headings.length && cells.slice(headings.length).some(extra => extra.trim() !== '')) problems.push('The row has more cells than the first line names.')
    const read = { name: name.safeParse(cell('name')), email: email.safeParse(cell('email')), sponsor: cell('sponsor').trim() }
    if (cell('name').trim() === '') problems.push('The name is missing.')
    else if (!read.name.success) problems.push('The name is too long or has characters that cannot be kept.')
    if (cell('email').trim() === '') problems.push('The e-mail is missing.')
    else if (!read.email.success) problems.push('That is not an e-mail address.')
    if (read.sponsor.length > 160) problems.push('The sponsor is too long.')
    const address = read.email.success ? read.email.data : cell('email').trim()
    const before = seen.get(address)
    if (address !== '' && before !== undefined) problems.push(`The same e-mail stands in line ${before}.`)
    if (address !== '' && before === undefined) seen.set(address, line)
    return { line, name: cell('name').trim().slice(0, 200), email: address.slice(0, 254), sponsor: read.sponsor.slice(0, 160), problems }
  })
}

/** Rows with the line each begins in: a quoted cell may hold line breaks. */
function withLines(data: readonly string[][], csv: string): { cells: string[], line: number }[] {
  let line = 1
  return data.map((cells) => {
    const begins = line
    line += 1 + cells.reduce((sum, cell) => sum + (cell.match(/\r\n|\r|\n/g)?.length ?? 0), 0)
    return { cells, line: begins }
  }).filter(() => csv !== '')
}
