import { describe, expect, it } from 'vitest'
import { changeAtLift, changePerLift } from '#shared/domain/airflow/change-per-lift'
import { curtainCoefficient } from '#shared/domain/airflow/curtain-coefficient'
import { curveResiduals } from '#shared/domain/airflow/curve-residuals'
import { cylinderSpread } from '#shared/domain/airflow/cylinder-spread'
import { exhaustIntakeRatio } from '#shared/domain/airflow/exhaust-intake-ratio'
import { flowLossVerdict } from '#shared/domain/airflow/flow-loss-verdict'
import { flowRepeatability } from '#shared/domain/airflow/flow-repeatability'
import type { FlowRun } from '#shared/domain/airflow/flow-run'
import { liftWeightedFlow } from '#shared/domain/airflow/lift-weighted-flow'
import { liftZero } from '#shared/domain/airflow/lift-zero'
import { namedLift } from '#shared/domain/airflow/named-lift'
import { smallestOpeningCoefficient } from '#shared/domain/airflow/smallest-opening-coefficient'
import type { SheetFindingCode } from '#shared/domain/airflow/sheet/sheet-reading'
import { dunnock, expectedSheets, readSheetFixture } from '../../fixtures/sheets/read-fixture'

const expected = expectedSheets()
const card = dunnock()
const withPoints = Object.keys(expected).filter(number => expected[number]?.points)

/** The only run of a sheet. */
function run(number: string): FlowRun {
  const { runs } = readSheetFixture(number, { casting: card })
  expect(runs).toHaveLength(1)
  return runs[0] as FlowRun
}

describe.each(withPoints)('practice sheet %s', (number) => {
  const sheet = expected[number]
  if (!sheet?.points) throw new Error('a sheet without points')
  const reading = readSheetFixture(number, { casting: card })

  it('comes to the school\'s points within 0.2 cfm, and to no others', () => {
    const points = reading.runs[0]?.points ?? []
    const wanted = sheet.points?.filter(point => point.cfm_28 !== null) ?? []
    expect(points.map(point => point.liftMm.toFixed(2))).toEqual(wanted.map(point => point.lift_mm.toFixed(2)))
    points.forEach((point, i) => expect(Math.abs(point.cfm28 - (wanted[i]?.cfm_28 as number))).toBeLessThan(0.2))
  })

  it('says whose, which port, which stage and which bench, and asks only what is open', () => {
    expect(reading.header).toMatchObject({ bench: sheet.bench, operator: sheet.operator, head: sheet.head, stage: sheet.stage })
    expect(reading.runs[0]).toMatchObject({ cylinder: sheet.cyl, side: sheet.side.toLowerCase() })
    expect(reading.header.plateRatio).toBeCloseTo(sheet.plate_ratio, 5)
    // Only the one sheet with day and month in doubt leaves a question.
    expect(reading.needs.map(need => need.field)).toEqual(number === '14' ? ['date'] : [])
  })

  it('has the school\'s two coefficients', () => {
    const { valveMm, stemMm, landMm, throatMm } = reading.header
    const side = reading.runs[0]?.side ?? 'intake'
    for (const point of reading.runs[0]?.points ?? []) {
      const wanted = sheet.points?.find(one => Math.abs(one.lift_mm - point.liftMm) < 0.02)
      expect(Math.abs(curtainCoefficient(point.cfm28, valveMm as number, point.liftMm) - (wanted?.cd_curtain as number))).toBeLessThan(0.004)
      // The land is 1.65 mm along the face where a sheet is silent, and the seat's outer edge is the card's.
      const valve = { seatOuterMm: card.valves[side].seat_od, stemMm: stemMm as number, seatWidthMm: (landMm ?? 1.65) * Math.SQRT1_2, seatDeg: 45, throatMm }
      expect(Math.abs(smallestOpeningCoefficient(point.cfm28, valve, point.liftMm) - (wanted?.cd_smallest_opening as number))).toBeLessThan(0.006)
    }
  })
})

describe('changes against the baseline', () => {
  it.each(Object.keys(expected).filter(number => expected[number]?.change))('sheet %s: change, U and verdict at every lift', (number) => {
    const sheet = expected[number]
    const changes = changePerLift(run(number), run(sheet?.against as string))
    const wanted = sheet?.change ?? []
    expect(changes).toHaveLength(wanted.length)
    changes.forEach((change, i) => {
      expect(change.changeCfm).toBeCloseTo(wanted[i]?.cfm as number, 1)
      expect(Math.abs(change.expandedUncertainty - (wanted[i]?.U as number))).toBeLessThan(0.02)
      expect(Math.abs(change.changePercent - (wanted[i]?.pct as number))).toBeLessThan(0.15)
      expect(change.verdict).toBe(wanted[i]?.verdict)
    })
  })
  it('rejects the sheet that lost its low lifts and names them; accepts the good student\'s', () => {
    expect(flowLossVerdict(changePerLift(run('09'), run('13')))).toEqual({ state: 'reject', liftsMm: [1, 2, 3], atLowLifts: true })
    for (const [now, before] of [['03', '01'], ['04', '02'], ['05', '01'], ['06', '02'], ['07', '01'], ['08', '02']] as const) {
      expect(flowLossVerdict(changePerLift(run(now), run(before))).state).toBe('accept')
    }
  })
  it('compares at lifts neither sheet was read at', () => {
    // A mm bench against an inch bench: both baselines of one casting, within a percent or so of each other (sheets README).
    const changes = changePerLift(run('13'), run('01'))
    expect(changes.map(change => change.liftMm)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11])
    for (const change of changes) expect(Math.abs(change.changePercent)).toBeLessThan(2.5)
    expect(changeAtLift(run('03'), run('01'), namedLift(41, 0.27))?.changePercent).toBeGreaterThan(7)
  })
})

describe('whole-curve figures of the handbook', () => {
  // Worked examples 6: flow weighted by the card's sin² curve.
  it.each([['01', 73.55], ['03', 78.87], ['05', 82.03], ['07', 85.92], ['13', 73.61], ['09', 79.07], ['02', 54.57], ['04', 56.22], ['08', 62.74]] as const)('weights sheet %s to %f cfm', (number, cfm) => {
    expect(Math.abs((liftWeightedFlow(run(number), card.lift_curve.max_lift)?.cfm28 as number) - cfm)).toBeLessThan(0.06)
  })
  it('has no weighted flow where the sheet stops short', () => {
    const short = run('01')
    expect(liftWeightedFlow({ ...short, points: short.points.slice(0, 6) }, card.lift_curve.max_lift)).toBeNull()
  })
  it('has the exhaust at 79 % of the intake at the lowest lift, 69 % at the top, 73 % weighted', () => {
    const ratio = exhaustIntakeRatio(run('08'), run('07'), card.lift_curve.max_lift)
    expect(ratio.perLift[0]?.percent).toBeCloseTo(79, 0)
    expect(ratio.perLift[ratio.perLift.length - 1]?.percent).toBeCloseTo(69, 0)
    expect(ratio.weighted?.percent).toBeCloseTo(73, 0)
  })
  it('pools the three runs of sheet 14 to 0.42 %, limit 1.2 %', () => {
    const repeats = run('14').repeats ?? []
    const steady = flowRepeatability(repeats.map(points => ({ cylinder: 2, side: 'intake', points, missing: [] })))
    expect(steady?.percent).toBeCloseTo(expected['14']?.repeat_pct as number, 2)
    expect(steady?.limitPercent).toBeCloseTo(1.19, 2)
  })
  it('finds the lift zero of sheet 17 at +0.31 mm and of sheet 09 at +0.08 mm', () => {
    expect(liftZero(run('17'), 41)?.liftMm).toBeCloseTo(0.31, 2)
    expect(liftZero(run('09'), 41)?.liftMm).toBeCloseTo(0.08, 2)
  })
  it('has the spread and the odd cylinder of sheet 18', () => {
    const { runs } = readSheetFixture('18', { casting: card })
    expect(runs.map(one => one.cylinder)).toEqual([1, 2, 3, 4])
    const spread = cylinderSpread(runs, 40.9956)
    spread.perLift.forEach((one, i) => expect(one.percent).toBeCloseTo(expected['18']?.spread_pct?.[i] as number, 1))
    expect(spread.worst?.percent).toBeCloseTo(4.0, 1)
    for (const { cylinder, percent } of spread.deviations) expect(percent).toBeCloseTo(expected['18']?.deviation_pct_by_cylinder?.[cylinder] as number, 1)
  })
  it('has the drift of sheet 19 and its bad day', () => {
    const { kind, plateLog } = readSheetFixture('19')
    expect(kind).toBe('plate-log')
    expect(plateLog).toMatchObject({ unit: 'cfm', nominal: 150 })
    expect(plateLog?.drift?.perWeek).toBeCloseTo(-0.175, 3)
    expect(plateLog?.drift?.overLogPercent).toBeCloseTo(-1.42, 2)
    expect(plateLog?.drift?.scatter).toBeCloseTo(0.19, 2)
    expect(plateLog?.drift?.outliers.map(({ residual }) => residual.toFixed(1))).toEqual(['-3.2'])
    expect(plateLog?.drift?.outside).toHaveLength(1)
  })
  it('holds every inner point of a sound sheet within 2.5 % of the others', () => {
    for (const number of withPoints.filter(one => one !== '12')) {
      for (const residual of curveResiduals(run(number))) expect(Math.abs(residual.percent), `sheet ${number} at ${residual.liftMm}`).toBeLessThan(2.5)
    }
  })
})

describe('findings', () => {
  // What each sheet was made to carry (sheets README); notes that say only what a sheet leaves out are listed apart.
  const faults: Record<string, SheetFindingCode[]> = {
    '06': ['missing-point'], '10': ['coefficient-over-one', 'leak-large'], '11': ['low-lift-coefficient-small', 'wrong-pressure'], '12': ['not-rising', 'point-off-curve'],
    '14': ['ambiguous-date', 'missing-point'], '15': ['coefficient-over-one'], '16': ['pressure-sag'], '17': ['lift-zero-off'], '18': ['cylinder-spread'], '19': ['bench-drift', 'plate-off-line'], '20b': ['setup-differs'],
  }
  const silent: SheetFindingCode[] = ['no-plate', 'nominal-size', 'several-runs', 'own-mean-ignored']

  it.each(Object.keys(expected))('sheet %s carries what was planted and nothing else', (number) => {
    const baseline = expected[number]?.against ? readSheetFixture(expected[number]?.against as string).header : null
    const { findings } = readSheetFixture(number, { casting: card, baseline })
    expect(findings.map(finding => finding.code).filter(code => !silent.includes(code)).sort()).toEqual(faults[number] ?? [])
    for (const finding of findings) expect(finding.text).toMatch(/^[A-Z"0-9+-].*[.?]$/)
  })
  it('refuses what cannot be and only asks about the rest', () => {
    const severity = (number: string, code: SheetFindingCode) => readSheetFixture(number, { casting: card }).findings.find(finding => finding.code === code)?.severity
    expect(severity('10', 'leak-large')).toBe('refuse')
    expect(severity('15', 'coefficient-over-one')).toBe('refuse')
    expect(severity('11', 'wrong-pressure')).toBe('refuse')
    expect(severity('12', 'point-off-curve')).toBe('ask')
    expect(severity('16', 'pressure-sag')).toBe('note')
  })
  it('offers the exchanged digits as a question and leaves the point as it was read', () => {
    const { findings, runs } = readSheetFixture('12')
    expect(findings.find(finding => finding.code === 'point-off-curve')?.text).toMatch(/did you mean 87\.6 for 78\.6\?/)
    expect(runs[0]?.points.find(point => Math.abs(point.liftMm - 8.89) < 0.01)?.cfm28).toBeCloseTo(78.4, 1)
  })
  it('hints at the pressure used and at the conversion done twice, and rescales nothing', () => {
    expect(readSheetFixture('11', { casting: card }).findings.find(finding => finding.code === 'wrong-pressure')?.text).toMatch(/0\.599.*at 10 inH2O/)
    expect(readSheetFixture('15', { casting: card }).findings.find(finding => finding.code === 'coefficient-over-one')?.text).toMatch(/sqrt\(28\/10\) is 1\.67/)
  })
})
