import papa from 'papaparse'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { cylinderSpread } from '#shared/domain/airflow/cylinder-spread'
import type { PlateLog } from '#shared/domain/airflow/sheet/sheet-reading'
import { expectedSheets } from '../../fixtures/sheets/read-fixture'
import { openSheetBench, practiceFile, type SheetBench } from './sheet-bench'
import { workbook } from './workbook'

let bench: SheetBench
let draft: string
const expected = expectedSheets()
const withPoints = Object.keys(expected).filter(number => expected[number]?.points)

beforeAll(async () => {
  bench = await openSheetBench()
  draft = await bench.freshDraft('DNK-0300')
})
afterAll(() => bench.close())

const sent = async (number: string) => {
  const { name, body } = practiceFile(number)
  return bench.send(draft, body, name)
}

describe('the school\'s practice sheets through the upload', () => {
  it('are nineteen with points', () => expect(withPoints).toHaveLength(19))

  it.each(withPoints)('sheet %s comes to the school\'s points within 0.2 cfm', async (number) => {
    const { status, body } = await sent(number)
    expect(status).toBe(201)
    expect(body).toMatchObject({ bench: expected[number]?.bench, version: 1, kind: 'flow', filename: expected[number]?.file })
    // expected.json, worked by the school with its own program.
    const wanted = expected[number]?.points?.filter(point => point.cfm_28 !== null) ?? []
    const [run] = body.runs
    expect(run).toMatchObject({ cylinder: expected[number]?.cyl, side: expected[number]?.side.toLowerCase() })
    expect(run?.points.map(point => point.liftMm.toFixed(2))).toEqual(wanted.map(point => point.lift_mm.toFixed(2)))
    run?.points.forEach((point, at) => {
      expect(Math.abs(point.cfm28 - (wanted[at]?.cfm_28 as number))).toBeLessThan(0.2)
      // Handbook 3.2: 0.7 % and 0.25 cfm in quadrature, k = 2.
      expect(point.expandedUncertainty).toBeCloseTo(Math.hypot(0.007 * point.cfm28, 0.25), 2)
    })
  })

  it('sheet 18 has four cylinders and the school\'s spread', async () => {
    const { body } = await sent('18')
    expect(body.runs.map(run => run.cylinder)).toEqual([1, 2, 3, 4])
    const spread = cylinderSpread(body.runs, 40.9956)
    spread.perLift.forEach((one, at) => expect(one.percent).toBeCloseTo(expected['18']?.spread_pct?.[at] as number, 1))
  })

  it('sheet 19 is a plate log with the school\'s drift', async () => {
    const { status, body } = await sent('19')
    expect(status).toBe(201)
    expect(body).toMatchObject({ kind: 'plate-log', runs: [] })
    // Sheets README: -0.175 cfm a week, -1.42 % over the log, one reading 3.2 cfm off the line.
    const { drift } = body.plateLog as PlateLog
    expect(drift?.perWeek).toBeCloseTo(-0.175, 3)
    expect(drift?.overLogPercent).toBeCloseTo(-1.42, 2)
    expect(drift?.outliers.map(one => one.residual.toFixed(1))).toEqual(['-3.2'])
  })

  it('a spreadsheet of sheet 01 behind a cover page comes to the same points', async () => {
    const rows = papa.parse<string[]>(practiceFile('01').body.toString('utf8').trim(), { delimiter: ',' }).data
    const { status, body } = await bench.send(draft, workbook([[['Sallowbeck', 'flow records']], rows]), 'bench.xlsx')
    expect(status).toBe(201)
    const wanted = expected['01']?.points ?? []
    expect(body.runs[0]?.points).toHaveLength(wanted.length)
    body.runs[0]?.points.forEach((point, at) => expect(Math.abs(point.cfm28 - (wanted[at]?.cfm_28 as number))).toBeLessThan(0.2))
  })

  it('shows the rows from their headings on, with the unit of each column over it', async () => {
    const { body } = await sent('13')
    expect(body.columns.map(({ heading, meaning, unit }) => [heading, meaning, unit])).toEqual([['Lift (mm)', 'lift', 'mm'], ['dp (kPa)', 'pressure', 'kPa'], ['Flow (l/s)', 'flow', 'l/s'], ['Remark', 'note', null]])
    expect(body.firstRows[0]).toEqual(['Lift (mm)', 'dp (kPa)', 'Flow (l/s)', 'Remark'])
    expect(body.firstRows[1]).toEqual(['1,0', '2,50', '5,08', ''])
  })
})
