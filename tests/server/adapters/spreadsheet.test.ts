import { strToU8, zipSync } from 'fflate'
import { expect, it } from 'vitest'
import { readSpreadsheet } from '../../../server/adapters/sheets/spreadsheet'
import { unpackZip } from '../../../server/adapters/sheets/unpack-zip'

const ns = 'xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"'
/** The smallest workbook that is one: ECMA-376 part 1, 18.2 and 18.3. */
function workbook(rows: string, more: Record<string, Uint8Array> = {}): Uint8Array {
  return zipSync({
    '[Content_Types].xml': strToU8('<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="xml" ContentType="application/xml"/><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/><Override PartName="/xl/worksheets/sheet1.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/></Types>'),
    '_rels/.rels': strToU8('<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/officeDocument" Target="xl/workbook.xml"/></Relationships>'),
    'xl/workbook.xml': strToU8(`<workbook ${ns} xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"><sheets><sheet name="Flow" sheetId="1" r:id="rId1"/></sheets></workbook>`),
    'xl/_rels/workbook.xml.rels': strToU8('<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/worksheet" Target="worksheets/sheet1.xml"/></Relationships>'),
    'xl/worksheets/sheet1.xml': strToU8(`<worksheet ${ns}><sheetData>${rows}</sheetData></worksheet>`),
    ...more,
  })
}
const text = (at: string, value: string) => `<c r="${at}" t="inlineStr"><is><t>${value}</t></is></c>`

it('gives rows of text: words, numbers in their shortest form, formulas as saved, gaps as nothing', async () => {
  const file = workbook(`<row r="1">${text('A1', 'lift (mm)')}${text('B1', 'cfm')}</row>
    <row r="2"><c r="A2"><v>1.2699999999999998</v></c><c r="B2"><f>20+2.4</f><v>22.399999999999999</v></c></row>
    <row r="4">${text('B4', '1,234')}</row>`)
  // 1.2699999999999998 is a number of its own; 22.399999999999999 is how XLSX writes 22.4 (shortest form that reads back, IEEE 754).
  expect(await readSpreadsheet(file)).toEqual([{ name: 'Flow', rows: [['lift (mm)', 'cfm'], ['1.2699999999999998', '22.4'], ['', ''], ['', '1,234']] }])
})
it('refuses a bomb that says how large it is', async () => {
  const bomb = workbook('', { 'xl/media/image1.xml': new Uint8Array(60 * 1024 ** 2) })
  expect(bomb.length).toBeLessThan(100_000)
  await expect(readSpreadsheet(bomb)).rejects.toMatchObject({ code: 'sheet_too_large' })
})
it('refuses a bomb whose directory lies about its size', async () => {
  const bomb = workbook('', { 'xl/media/image1.xml': new Uint8Array(60 * 1024 ** 2) })
  const view = new DataView(bomb.buffer, bomb.byteOffset, bomb.byteLength)
  let changed = 0
  for (let at = 0; at < bomb.length - 4; at++) {
    // APPNOTE 4.3.12: the size after unpacking is 24 bytes into a directory entry.
    if (view.getUint32(at, true) === 0x02014b50 && view.getUint32(at + 24, true) === 60 * 1024 ** 2) {
      view.setUint32(at + 24, 100, true)
      changed++
    }
  }
  expect(changed).toBe(1)
  await expect(readSpreadsheet(bomb)).rejects.toMatchObject({ code: 'sheet_too_large' })
  // Spoiled near its end: told too large, it was stopped before it got there, and the memory was never taken.
  const name = new TextEncoder().encode('xl/media/image1.xml')
  const local = Buffer.from(bomb.buffer, bomb.byteOffset, bomb.byteLength).indexOf(name)
  const packed = zipSync({ x: new Uint8Array(60 * 1024 ** 2) }).length
  bomb.fill(0xff, local + packed - 600, local + packed - 300)
  expect(() => unpackZip(bomb, { bytes: 1024 ** 2, entries: 200 })).toThrow(expect.objectContaining({ code: 'sheet_too_large' }))
  expect(() => unpackZip(bomb, { bytes: 100 * 1024 ** 2, entries: 200 })).toThrow(expect.objectContaining({ code: 'sheet_unreadable' }))
})
it('refuses more than 200 files inside', async () => {
  const many = Object.fromEntries(Array.from({ length: 200 }, (_, n) => [`x/${n}.xml`, strToU8('<a/>')]))
  await expect(readSpreadsheet(workbook('', many))).rejects.toMatchObject({ code: 'sheet_too_large' })
})
it('counts entries that overlap as often as they are named', () => {
  expect(() => unpackZip(zipSync({ a: new Uint8Array(60), b: new Uint8Array(60) }), { bytes: 100, entries: 10 })).toThrow(expect.objectContaining({ code: 'sheet_too_large' }))
})
it('refuses row 5,001, a cell far away, and a column past the last', async () => {
  const rows = (count: number) => Array.from({ length: count }, (_, n) => `<row r="${n + 1}"><c r="A${n + 1}"><v>1</v></c></row>`).join('')
  expect((await readSpreadsheet(workbook(rows(5000))))[0]?.rows).toHaveLength(5000)
  await expect(readSpreadsheet(workbook(rows(5001)))).rejects.toMatchObject({ code: 'sheet_too_large' })
  await expect(readSpreadsheet(workbook('<row r="1048576"><c r="A1048576"><v>1</v></c></row>'))).rejects.toMatchObject({ code: 'sheet_too_large' })
  await expect(readSpreadsheet(workbook('<row r="1"><c r="XFD1"><v>1</v></c></row>'))).rejects.toMatchObject({ code: 'sheet_too_large' })
  await expect(readSpreadsheet(workbook('<row><c s="1"  r="XFD1"><v>1</v></c></row>'))).rejects.toMatchObject({ code: 'sheet_too_large' })
})
it.each([
  ['nothing', new Uint8Array()],
  ['a text', strToU8('lift,cfm\n1,20\n')],
  ['another kind of archive', zipSync({ 'a.txt': strToU8('x') })],
  ['half a workbook', workbook('').subarray(0, 600)],
  ['a workbook with a document type', workbook('', { 'xl/styles.xml': strToU8('<!DOCTYPE x [<!ENTITY a "b">]><x>&a;</x>') })],
  ['a workbook without its sheet', workbook('', { 'xl/worksheets/sheet1.xml': strToU8('not xml <') })],
])('refuses %s with a sentence', async (_what, file) => {
  await expect(readSpreadsheet(file)).rejects.toMatchObject({ code: 'sheet_unreadable', sentence: expect.stringMatching(/\.$/) })
})
it('answers any spoiled workbook with a refusal or with rows, never with a fault', async () => {
  const whole = workbook(`<row r="1">${text('A1', 'lift')}</row>`)
  // A fixed walk over the file, so that a failure can be seen again.
  for (let n = 0; n < 400; n++) {
    const spoiled = Uint8Array.from(whole)
    spoiled[(n * 7919) % spoiled.length] = (n * 31) % 256
    const answer = await readSpreadsheet(spoiled).then(() => 'rows', (thrown: { name: string }) => thrown.name)
    expect(['rows', 'AdapterRefusal']).toContain(answer)
  }
})
