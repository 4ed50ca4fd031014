import { randomUUID } from 'node:crypto'
import { strToU8, zipSync } from 'fflate'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { Upload } from '#server/db/entities/Upload'
import { decide } from '../walk'
import { sendFile } from '../uploads/send-file'
import { openSheetBench, practiceFile, type SheetBench } from './sheet-bench'
import { workbook } from './workbook'

let bench: SheetBench
let draft: string

beforeAll(async () => {
  bench = await openSheetBench()
  draft = await bench.freshDraft('DNK-0500')
})
afterAll(() => bench.close())

const kept = async () => [await bench.school.em().count(FlowSheet), await bench.school.em().count(FlowSheetReading)]

/** Refused, with nothing half-made: no sheet, no reading, and the upload as it was. */
async function refuses(input: { uploadId: string } & Record<string, unknown>, status: number, code: string): Promise<void> {
  const before = await kept()
  const upload = await bench.school.em().findOne(Upload, input.uploadId)
  expect(await bench.put(draft, input)).toMatchObject({ status, body: { code } })
  expect(await kept()).toEqual(before)
  if (upload) expect((await bench.school.em().findOneOrFail(Upload, input.uploadId)).state).toBe(upload.state)
}

it('refuses a spreadsheet that unpacks to 60 MB', async () => {
  const bomb = workbook([[['Lift mm', 'cfm']]], { 'xl/media/image1.xml': new Uint8Array(60 * 1024 ** 2) })
  expect(bomb.length).toBeLessThan(100_000)
  await refuses({ uploadId: await bench.upload(bomb, 'bench.xlsx') }, 422, 'sheet_too_large')
})
it('refuses an archive that is no workbook', async () => {
  await refuses({ uploadId: await bench.upload(zipSync({ 'a.txt': strToU8('lift,cfm') }), 'bench.xlsx') }, 422, 'sheet_unreadable')
})
it('refuses a workbook that is cut short', async () => {
  const whole = workbook([[['Lift mm', 'Flow cfm'], ['1.0', '18.2']]])
  await refuses({ uploadId: await bench.upload(whole.slice(0, whole.length - 40), 'bench.xlsx') }, 422, 'sheet_unreadable')
})
it('refuses a text that turns into something else behind its first page', async () => {
  await refuses({ uploadId: await bench.upload(`Lift mm,Flow cfm\n${'1.0,18.2\n'.repeat(600)}\0\0\0`) }, 422, 'sheet_unreadable')
})
it('refuses a sheet with nothing in it', async () => {
  await refuses({ uploadId: await bench.upload('\n ,  ,\n\n') }, 422, 'sheet_unreadable')
})
it('refuses a PDF named .csv before it is a sheet at all', async () => {
  const { complete } = await sendFile(bench.imre, Buffer.from('%PDF-1.7\n1 0 obj\n<<>>\nendobj\n'), { purpose: 'flow-sheet', filename: 'bench.csv', contentType: 'text/csv' })
  expect(complete).toMatchObject({ status: 422, body: { code: 'upload_wrong_type' } })
})
it('refuses an upload made for something else, another person\'s, nobody\'s, and one used in another submission', async () => {
  const photo = await sendFile(bench.imre, Buffer.from([0xff, 0xd8, 0xff, 0xe0, 0, 16, 0x4a, 0x46, 0x49, 0x46, 0, 1, 1, 0, 0, 1, 0, 1, 0, 0]))
  await refuses({ uploadId: photo.id }, 422, 'upload_wrong_purpose')
  const hanne = await bench.api.as(bench.school.hanne)
  await refuses({ uploadId: await bench.upload(practiceFile('03').body, '03.csv', hanne) }, 404, 'upload_not_found')
  await refuses({ uploadId: randomUUID() }, 404, 'upload_not_found')
  const { body } = await bench.send(await bench.freshDraft('DNK-0501'), practiceFile('03').body)
  await refuses({ uploadId: body.uploadId }, 409, 'upload_used')
})
it('refuses an upload that is not there yet', async () => {
  const announced = await bench.imre.post<{ id: string }>('/api/uploads', { purpose: 'flow-sheet', filename: 'a.csv', bytes: 10, contentType: 'text/csv', sha256: 'a'.repeat(64) })
  await refuses({ uploadId: announced.body.id }, 409, 'upload_not_received')
})
it('refuses answers to what was not asked, columns that cannot be, cylinder 9, NUL and halves of characters', async () => {
  const uploadId = await bench.upload(practiceFile('03').body)
  await refuses({ uploadId, answers: { colour: 'red' } }, 422, 'input_invalid')
  await refuses({ uploadId, columns: [{ index: 0, meaning: 'horsepower' }] }, 422, 'input_invalid')
  await refuses({ uploadId, columns: [{ index: 0, meaning: 'lift', unit: 'cfm' }] }, 422, 'input_invalid')
  await refuses({ uploadId, columns: [{ index: -1, meaning: 'lift' }] }, 422, 'input_invalid')
  await refuses({ uploadId, answers: { cylinder: '9' } }, 422, 'port_not_on_head')
  await refuses({ uploadId, answers: { bench: 'No\0rth' } }, 422, 'input_invalid')
  await refuses({ uploadId, bench: 'North \ud800' }, 422, 'input_invalid')
  await refuses({ uploadId, answers: { columns: 'the second one' } }, 422, 'input_invalid')
  expect(await bench.put(draft, { uploadId: 'not-an-id' })).toMatchObject({ status: 422, body: { code: 'input_invalid' } })
  expect(await bench.put(draft, { uploadId, answers: { side: 'left', cylinder: '2' } })).toMatchObject({ status: 201 })
})
it.each<[string, string | Buffer, string[]]>([
  ['a letter', 'a letter to Hanne,\nwith commas, and no table', ['columns']],
  ['figures that are none', `Lift mm,Flow cfm\n${'9'.repeat(400)},1e999\nNaN,NaN\n1.0,1,2,3\n`, ['columns']],
  ['UTF-16 and two lifts', Buffer.from('\ufeffLift mm\tFlow cfm\r\n1.0\t18.2\r\n2.0\t36.0\r\n', 'utf16le'), ['bench', 'cylinder', 'date', 'side', 'stage', 'stem', 'valve']],
])('asks what it needs of %s, and breaks over nothing', async (_, body, fields) => {
  const answer = await bench.send(draft, body)
  expect(answer).toMatchObject({ status: 201, body: { state: 'asked' } })
  expect(answer.body.needs.map(need => need.field)).toEqual(expect.arrayContaining(fields))
})
it('refuses twenty thousand separators and nothing between them', async () => {
  await refuses({ uploadId: await bench.upload(';'.repeat(20_000)) }, 422, 'sheet_unreadable')
})
it('keeps a long remark that would be cut in the middle of a character', async () => {
  const { status, body } = await bench.send(draft, `Lift mm,Flow cfm,Note\n1.0,18,${'e'.repeat(199)}${'\u{1F600}'.repeat(90)}\n2.0,36,\n3.0,50,\n`)
  expect(status).toBe(201)
  expect(body.firstRows[1]?.[2]).toBe(`${'e'.repeat(199)}\ufffd`)
})
it('keeps a workbook with halves of characters in its cells', async () => {
  const { status, body } = await bench.send(draft, workbook([[['Lift mm', 'Flow cfm', 'Note'], ['1.0', '18', 'No&#xD800;rth'], ['2.0', '36'], ['3.0', '50']]]), 'bench.xlsx')
  expect(status).toBe(201)
  expect(body.firstRows[1]?.[2]?.isWellFormed()).toBe(true)
})
it('takes no sheet after the decision, nor touches one', async () => {
  const decided = await bench.freshDraft('DNK-0502')
  const { body } = await bench.send(decided, practiceFile('03').body)
  await decide(bench.school, decided, 'send-back')
  const uploadId = await bench.upload(practiceFile('04').body)
  expect(await bench.put(decided, { uploadId })).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
  expect(await bench.put(decided, { uploadId: body.uploadId })).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
  expect(await bench.imre.post(`/api/flow-sheets/${body.id}/set-aside`)).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
  expect(await bench.imre.post(`/api/flow-sheets/${body.id}/use`)).toMatchObject({ status: 409, body: { code: 'submission_decided' } })
})
it('finds no sheet and no submission by an id that is none', async () => {
  expect(await bench.imre.post('/api/flow-sheets/7/use')).toMatchObject({ status: 404, body: { code: 'id_invalid' } })
  expect(await bench.imre.post(`/api/flow-sheets/${randomUUID()}/use`)).toMatchObject({ status: 404, body: { code: 'sheet_not_found' } })
})
