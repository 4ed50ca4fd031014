import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { Submission } from '#server/db/entities/Submission'
import { findSubmission } from '#server/services/submissions/find-submission'
import { gatherEvidence } from '#server/services/submissions/gather-evidence'
import { openSheetBench, practiceFile, type SheetBench } from './sheet-bench'

let bench: SheetBench
let draft: string
let count = 400

beforeAll(async () => {
  bench = await openSheetBench()
})
beforeEach(async () => {
  count += 1
  draft = await bench.freshDraft(`DNK-0${count}`)
})
afterAll(() => bench.close())

const practice = (number: string) => bench.send(draft, practiceFile(number).body, practiceFile(number).name)
const codes = (findings: { code: string }[]) => findings.map(finding => finding.code)
const evidence = async () => {
  const em = bench.school.em()
  return (await gatherEvidence(em, await findSubmission(em, bench.harness.app, bench.school.imre, draft))).evidence
}

/** A sheet of a bench nobody has a profile of, that leaves the flow's unit out. */
const withoutUnit = `Bench;Attic
Date;2026-03-02
Cylinder;1
Side;Intake
Stage;After bowl
Valve;41.0 mm
Stem;8.0 mm
Test pressure;28 inH2O

Lift mm;Q
1.0;18.2
2.0;36.0
4.0;69.9
6.0;95.0
8.0;112.5
10.0;121.8
`

describe('a question of a sheet', () => {
  it('is answered in a new reading; the first reading and the file stay', async () => {
    const first = await practice('14')
    expect(first).toMatchObject({ status: 201, body: { state: 'asked', needs: [{ field: 'date', choices: ['2026-03-05', '2026-05-03'] }] } })
    const uploadId = first.body.uploadId
    const again = await bench.put(draft, { uploadId, answers: { date: '2026-03-05' } })
    expect(again).toMatchObject({ status: 200, body: { id: first.body.id, version: 2, needs: [], answers: { date: '2026-03-05' }, header: { date: '2026-03-05' } } })
    const kept = await bench.school.em().find(FlowSheetReading, { sheet: first.body.id }, { orderBy: { version: 'asc' } })
    expect(kept.map(one => [one.version, one.header.date])).toEqual([[1, null], [2, '2026-03-05']])
    const events = await bench.school.em().find(AuditEvent, { subject: `submission:${draft}` }, { orderBy: { at: 'asc' } })
    expect(events.map(event => event.action)).toEqual(['flow-sheet-added', 'flow-sheet-read-again'])
  })

  it('about a unit leaves the curve out until somebody says, and takes the answer back when it is emptied', async () => {
    const first = await bench.send(draft, withoutUnit)
    expect(first).toMatchObject({ status: 201, body: { state: 'asked', runs: [] } })
    expect(first.body.needs.find(need => need.field === 'flow-unit')).toBeDefined()
    const { uploadId } = first.body
    const inCfm = await bench.put(draft, { uploadId, answers: { 'flow-unit': 'cfm' } })
    expect(inCfm.body.needs).toEqual([])
    // No air was given, so 1.2041 kg/m3 stands and 28 inH2O is the basis itself: the figures are what the sheet says.
    expect(inCfm.body.runs[0]?.points.map(point => point.cfm28.toFixed(1))).toEqual(['18.2', '36.0', '69.9', '95.0', '112.5', '121.8'])
    // 1 l/s is 2.11888 cfm (0.3048 m to the foot, exactly).
    const inLitres = await bench.put(draft, { uploadId, answers: { 'flow-unit': 'l/s' } })
    expect(inLitres.body.runs[0]?.points[0]?.cfm28).toBeCloseTo(18.2 * 2.118880, 2)
    expect((await bench.put(draft, { uploadId, answers: { 'flow-unit': '' } })).body.needs.map(need => need.field)).toContain('flow-unit')
  })

  it('is answered by pointing at columns too, and the choice outlasts the next answer', async () => {
    const first = await bench.send(draft, withoutUnit.replace(';Q', ';What the dial said'))
    const { uploadId } = first.body
    const chosen = await bench.put(draft, { uploadId, columns: [{ index: 0, meaning: 'lift', unit: 'mm' }, { index: 1, meaning: 'flow', unit: 'cfm' }] })
    const after = await bench.put(draft, { uploadId, answers: { cylinder: '2' } })
    expect(first.body.needs.map(need => need.field)).toContain('columns')
    for (const { body } of [chosen, after]) expect(body.columns[1]).toMatchObject({ meaning: 'flow', unit: 'cfm', from: 'as chosen' })
    expect(after.body.runs[0]).toMatchObject({ cylinder: 2, side: 'intake' })
    expect(after.body.runs[0]?.points).toHaveLength(6)
  })

  it('about columns is answered in words, counted from 1', async () => {
    const first = await bench.send(draft, withoutUnit.replace(';Q', ';What the dial said'))
    const { body } = await bench.put(draft, { uploadId: first.body.uploadId, answers: { columns: '1 lift mm, column 2: flow l/s' } })
    expect(body.needs).toEqual([])
    // 1 l/s is 2.11888 cfm (0.3048 m to the foot, exactly).
    expect(body.runs[0]?.points[0]?.cfm28).toBeCloseTo(18.2 * 2.118880, 2)
  })

  it('about the bench is answered with its profile', async () => {
    // The East bench gives thousandths of a range whose full scale only its profile knows.
    const nameless = practiceFile('11').body.toString('utf8').replaceAll(/East bench|Bench:? ?East|\bEast\b/g, '')
    const { body } = await bench.send(draft, nameless)
    const named = await bench.put(draft, { uploadId: body.uploadId, bench: 'East' })
    expect(named.body).toMatchObject({ bench: 'East', answers: { bench: 'East' } })
    expect(named.body.needs.map(need => need.field)).not.toContain('bench')
  })
})

describe('what only the school can see of a sheet', () => {
  it('names another head, another stage and a cylinder this head has not', async () => {
    const { body } = await practice('01')
    expect(codes(body.findings)).toEqual(expect.arrayContaining(['other-head', 'other-stage']))
    const nine = await bench.send(draft, withoutUnit.replace('Cylinder;1', 'Cylinder;9').replace('Lift mm;Q', 'Lift mm;Flow cfm'))
    expect(nine.body.findings).toContainEqual(expect.objectContaining({ code: 'cylinder-not-on-head', severity: 'refuse' }))
    const own = await bench.send(draft, withoutUnit.replace('Cylinder;1', `Cylinder;1\nHead;DNK-0${count}`).replace('Lift mm;Q', 'Lift mm;Flow cfm'))
    expect(codes(own.body.findings)).not.toContain('other-head')
    expect(codes(own.body.findings)).not.toContain('other-stage')
  })

  it('holds the set-up against the head\'s own baseline', async () => {
    await practice('20a')
    const bowl = await practice('20b')
    expect(bowl.body.findings.find(finding => finding.code === 'setup-differs')?.text).toMatch(/pipe/)
  })

  it('knows a file that was used before, and counts it once', async () => {
    await practice('03')
    const again = await practice('03')
    expect(codes(again.body.findings)).toContain('seen-before')
    expect(again.body.state).toBe('asked')
    expect((await evidence()).sheets.map(sheet => sheet.id)).toEqual([again.body.id])
  })
})

describe('a sheet that was read', () => {
  it('counts at once, with its header, and no longer when it is set aside', async () => {
    const { body } = await practice('03')
    expect((await evidence()).sheets).toMatchObject([{ id: body.id, op: 100, header: { stage: 'bowl' } }])
    expect(await bench.imre.post(`/api/flow-sheets/${body.id}/set-aside`)).toMatchObject({ status: 200 })
    expect(await bench.imre.post(`/api/flow-sheets/${body.id}/set-aside`)).toMatchObject({ status: 200 })
    expect((await evidence()).sheets).toEqual([])
    expect(await bench.put(draft, { uploadId: body.uploadId })).toMatchObject({ status: 409, body: { code: 'sheet_set_aside' } })
    expect(await bench.imre.post(`/api/flow-sheets/${body.id}/use`)).toMatchObject({ status: 409, body: { code: 'sheet_set_aside' } })
  })

  it('is confirmed when nothing is open, and not while a question stands or it cannot be right', async () => {
    const open = await practice('14')
    expect(await bench.imre.post(`/api/flow-sheets/${open.body.id}/use`)).toMatchObject({ status: 409, body: { code: 'sheet_open_questions', issues: [{ path: 'answers.date' }] } })
    const impossible = await practice('10')
    expect(await bench.imre.post(`/api/flow-sheets/${impossible.body.id}/use`)).toMatchObject({ status: 409, body: { code: 'sheet_cannot_be_right' } })
    const sound = await practice('03')
    expect(await bench.imre.post(`/api/flow-sheets/${sound.body.id}/use`)).toMatchObject({ status: 200, body: { state: 'used' } })
    // A new reading has to be looked at anew.
    expect((await bench.put(draft, { uploadId: sound.body.uploadId, answers: { cylinder: '2' } })).body.state).not.toBe('used')
  })

  it('is one sheet to one key, and raises the version once the submission was asked', async () => {
    const uploadId = await bench.upload(practiceFile('03').body)
    const key = randomUUID()
    const [one, other] = await Promise.all([bench.put(draft, { uploadId }, bench.imre, key), bench.put(draft, { uploadId }, bench.imre, key)])
    expect(one.body.id).toBe(other.body.id)
    expect([one.status, other.status]).toEqual([201, 201])
    expect(await bench.school.em().count(FlowSheetReading, { sheet: one.body.id })).toBe(1)
    await bench.imre.post(`/api/submissions/${draft}/ask`, {})
    const { version } = await bench.school.em().findOneOrFail(Submission, draft)
    await bench.put(draft, { uploadId, answers: { cylinder: '2' } })
    expect(await bench.school.em().findOneOrFail(Submission, draft)).toMatchObject({ version: version + 1, state: 'asked' })
  })

  it('is answered by the instructor on the student\'s behalf, who did not send it', async () => {
    const { body } = await practice('14')
    const hanne = await bench.api.as(bench.school.hanne)
    expect(await bench.put(draft, { uploadId: body.uploadId, answers: { date: '2026-03-05' } }, hanne)).toMatchObject({ status: 200, body: { id: body.id, version: 2 } })
    const stranger = await bench.api.as(bench.school.stranger)
    expect(await stranger.post(`/api/flow-sheets/${body.id}/set-aside`)).toMatchObject({ status: 404, body: { code: 'sheet_not_found' } })
    expect((await bench.school.em().findOneOrFail(FlowSheet, body.id)).state).not.toBe('set-aside')
  })
})
