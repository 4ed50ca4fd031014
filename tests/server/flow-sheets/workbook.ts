import { strToU8, zipSync } from 'fflate'

const ns = 'xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"'
const kinds = 'http://schemas.openxmlformats.org/officeDocument/2006/relationships'

/** The smallest workbook that is one, a worksheet for each table (ECMA-376 part 1, 18.2 and 18.3); `more` are files beside them. */
export function workbook(tables: readonly (readonly (readonly string[])[])[], more: Record<string, Uint8Array> = {}): Uint8Array {
  const numbers = tables.map((_, index) => index + 1)
  return zipSync({
    '[Content_Types].xml': strToU8(`<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="xml" ContentType="application/xml"/><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/>${numbers.map(n => `<Override PartName="/xl/worksheets/sheet${n}.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/>`).join('')}</Types>`),
    '_rels/.rels': strToU8(`<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="${kinds}/officeDocument" Target="xl/workbook.xml"/></Relationships>`),
    'xl/workbook.xml': strToU8(`<workbook ${ns} xmlns:r="${kinds}"><sheets>${numbers.map(n => `<sheet name="Sheet ${n}" sheetId="${n}" r:id="rId${n}"/>`).join('')}</sheets></workbook>`),
    'xl/_rels/workbook.xml.rels': strToU8(`<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">${numbers.map(n => `<Relationship Id="rId${n}" Type="${kinds}/worksheet" Target="worksheets/sheet${n}.xml"/>`).join('')}</Relationships>`),
    ...Object.fromEntries(tables.map((rows, index) => [`xl/worksheets/sheet${index + 1}.xml`, strToU8(`<worksheet ${ns}><sheetData>${rows.map(rowXml).join('')}</sheetData></worksheet>`)])),
    ...more,
  })
}

function rowXml(cells: readonly string[], row: number): string {
  return `<row r="${row + 1}">${cells.map((cell, column) => cell === '' ? '' : cellXml(cell, `${columnName(column)}${row + 1}`)).join('')}</row>`
}

/** Numbers as numbers, the rest as words; what is written as XML already (a character reference) stays. */
function cellXml(cell: string, at: string): string {
  return /^-?\d+(\.\d+)?$/.test(cell) ? `<c r="${at}"><v>${cell}</v></c>` : `<c r="${at}" t="inlineStr"><is><t>${cell.replace(/</g, '&lt;')}</t></is></c>`
}

const columnName = (index: number): string => (index < 26 ? '' : columnName(Math.floor(index / 26) - 1)) + String.fromCharCode(65 + index % 26)
