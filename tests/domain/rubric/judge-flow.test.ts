import { describe, expect, it } from 'vitest'
import { flowLossVerdict } from '#shared/domain/airflow/flow-loss-verdict'
import type { LiftChange } from '#shared/domain/airflow/change-per-lift'
import { seededNormal } from '#shared/domain/rubric/compute/seeded-normal'
import type { CriterionResult, EvidenceSet, SheetEvidence } from '#shared/domain/rubric/evidence'
import { judgeCriterion, judgeSubmission } from '#shared/domain/rubric/judge-submission'
import { allPhotos, criterionOf, nothing, reading, stageOf } from './school'
import { sheetEvidence } from './sheet-evidence'

const allPorts = [1, 2, 3, 4].flatMap(cylinder => (['intake', 'exhaust'] as const).map(side => ({ cylinder, side })))

/** A flow check with its photos and plate readings in, so that what is tested is its sheets. */
function flowed(op: number, sheets: SheetEvidence[]): EvidenceSet {
  const evidence = nothing(op, { ports: allPorts, sheets, readings: ['before', 'after'].map(spot => reading('plate-flow', spot, 150, { op, unit: 'cfm', cylinder: null, side: null })) })
  return { ...evidence, photos: allPhotos(evidence) }
}

function of(evidence: EvidenceSet, id: string, side: 'intake' | 'exhaust' | null): CriterionResult[] {
  return judgeCriterion(criterionOf(id), evidence).filter(one => one.side === side)
}

describe('a sound bowl (sheets 01 to 04)', () => {
  const evidence = flowed(100, [
    sheetEvidence('01_tallowin_int_baseline.csv', 30), sheetEvidence('02_tallowin_exh_baseline.csv', 30),
    sheetEvidence('03_tallowin_int_bowl.csv', 100), sheetEvidence('04_tallowin_exh_bowl.csv', 100),
  ])

  it('loses no lift and gains what a bowl gains', () => {
    expect(of(evidence, 'FB-01', 'intake')[0]).toMatchObject({ state: 'accept', cylinder: 2, text: 'No lift lost; 9 of 9 gained beyond doubt.' })
    // The school's worked sums: 4.7, 7.1 and 10.1 % at 0.12, 0.18 and 0.27 D, another interpolation; 2.3, 2.0, 2.9 % exhaust.
    const gains = of(evidence, 'FB-02i', 'intake')
    expect(gains.map(one => one.state)).toEqual(['accept', 'accept', 'accept'])
    gains.forEach((one, index) => expect(Math.abs((one.value ?? 0) - ([4.7, 7.1, 10.1][index] ?? 0))).toBeLessThan(0.2))
    of(evidence, 'FB-02e', 'exhaust').forEach((one, index) => expect(Math.abs((one.value ?? 0) - ([2.3, 2.0, 2.9][index] ?? 0))).toBeLessThan(0.2))
  })
  it('has believable coefficients, a smooth curve and a steady pressure', () => {
    // sheets/README: every sheet but 10 and 15 keeps the smallest-opening coefficient under 0.941.
    for (const id of ['FB-03', 'FB-04', 'FB-05', 'FB-06']) for (const side of ['intake', 'exhaust'] as const) expect([id, side, of(evidence, id, side)[0]?.state]).toEqual([id, side, 'accept'])
    expect(of(evidence, 'FB-04', 'intake')[0]?.value).toBeCloseTo(0.927, 2)
    expect(of(evidence, 'FB-07', null)[0]).toMatchObject({ state: 'accept', cylinder: 2 })
    // Weighted 56.22 over 78.87 cfm, the school's worked sums.
    expect(of(evidence, 'FB-07', null)[0]?.value).toBeCloseTo(100 * 56.22 / 78.87, 0)
  })
  it('is scored in well under a second', () => {
    judgeSubmission(stageOf('FB'), evidence)
    const from = performance.now()
    for (let n = 0; n < 20; n++) judgeSubmission(stageOf('FB'), evidence)
    // 20 ms each is the budget; a loaded machine gets some room.
    expect((performance.now() - from) / 20).toBeLessThan(40)
  })
})

describe('a bowl that lost its low lifts (sheets 13 and 09)', () => {
  const evidence = flowed(100, [sheetEvidence('13_crake_int_baseline.csv', 30), sheetEvidence('09_crake_int_bowl_lost_low_lift.csv', 100)])

  it('is rejected at 1, 2 and 3 mm, which the sentence names with where to look', () => {
    const [lost] = of(evidence, 'FB-01', 'intake')
    expect(lost?.state).toBe('reject')
    expect(lost?.text).toBe('Down beyond doubt at 1.00 mm (0.039 in), 2.00 mm (0.079 in) and 3.00 mm (0.118 in). Loss at the low lifts points at the seat edge: look at the land width and for a rounded corner before you touch the port again.')
    expect(lost?.trace.filter(step => step.gives.endsWith('loss'))).toHaveLength(3)
  })
  it('is accepted for its gains at the named lifts all the same', () => {
    // The school's worked sums: 4.5, 8.4, 11.7 %; 0.27 D is past the sheet's 11 mm, which is within 2 % of it.
    const gains = of(evidence, 'FB-02i', 'intake')
    expect(gains.map(one => one.state)).toEqual(['accept', 'accept', 'accept'])
    gains.forEach((one, index) => expect(Math.abs((one.value ?? 0) - ([4.5, 8.4, 11.7][index] ?? 0))).toBeLessThan(0.2))
    expect(gains[2]?.liftMm).toBe(11)
  })
  it('waits for the side nobody has run', () => {
    expect(of(evidence, 'FB-01', 'exhaust')[0]).toMatchObject({ state: 'not-assessed', cylinder: null, text: 'There is no flow sheet of this stage for the exhaust side yet.' })
  })
})

describe('sheets with a fault', () => {
  const usual = sheetEvidence('01_tallowin_int_baseline.csv', 30)

  it('sees that the pressure written is not the pressure used (11)', () => {
    const [drift] = of(flowed(130, [usual, sheetEvidence('11_quillfeather_int_port_wrong_pressure.csv', 130)]), 'FP-06', 'intake')
    expect(drift?.state).toBe('reject')
    expect(drift?.text).toMatch(/^The pressure written is not the pressure used: every lift is off by the same ratio, 0\.60, which matches 10(?:\.04)? inH2O, not 28\.0 inH2O\.$/)
  })
  it('asks for the notebook where two digits were exchanged (12)', () => {
    const [point] = of(flowed(100, [sheetEvidence('12_oake_exh_bowl_transposed.csv', 100)]), 'FB-05', 'exhaust')
    expect(point).toMatchObject({ state: 'reject', liftMm: expect.closeTo(8.89, 6) })
    expect(point?.text).toContain('two digits exchanged would put it back')
  })
  it('refuses more air than a perfect nozzle passes (15)', () => {
    const [coefficient] = of(flowed(100, [sheetEvidence('15_ivelle_int_baseline_corrected_twice.csv', 100)]), 'FB-04', 'intake')
    expect(coefficient?.state).toBe('reject')
    // sheets/README: 1.54 on the smallest opening.
    expect(coefficient?.value).toBeCloseTo(1.54, 1)
  })
  it('sees the bench run out of breath at the top (16)', () => {
    const [drift] = of(flowed(150, [usual, sheetEvidence('16_loder_int_shortturn_bench_limit.csv', 150)]), 'FT-06', 'intake')
    expect(drift?.state).toBe('reject')
    expect(drift?.text).toContain('Only the top lifts are short')
  })
  it('names the leak and what it is of the lowest reading (10)', () => {
    const [leak] = of(flowed(30, [sheetEvidence('10_pellam_int_baseline_leaking.csv', 30)]), 'B-06', 'intake')
    // sheets/README: 6.2 cfm at 28, a fifth of the reading.
    expect(leak?.value).toBeCloseTo(6.2, 1)
    expect(leak?.text).toMatch(/still reads 6\.2 cfm\. At your lowest lift that is 2\d % of the reading/)
  })
  it('sees a dial zeroed on a valve that was not home (17)', () => {
    const [zero] = of(flowed(30, [sheetEvidence('17_sallis_int_baseline_lift_zero.csv', 30)]), 'B-08', 'intake')
    expect(zero?.state).toBe('reject')
    expect(zero?.value).toBeCloseTo(0.31, 1)
    expect(zero?.text).toContain('24 % at worst')
  })
  it('pools three runs of one port (14) and wants three where there is one', () => {
    const three = flowed(30, [sheetEvidence('14_amberlow_int_bowl_three_runs.tsv', 30)])
    const [repeat] = of(three, 'B-07', 'intake')
    // Handbook 8.10: 0.42 %, limit 1.2 %.
    expect(repeat?.value).toBeCloseTo(0.42, 2)
    expect(repeat).toMatchObject({ state: 'accept', text: 'Three set-ups scatter by 0.4 %. From now on a change of 1.2 % or more is news.' })
    expect(of(flowed(30, [usual]), 'B-07', 'intake')[0]).toMatchObject({ state: 'not-assessed' })
  })
  it('names the cylinder that is down (18)', () => {
    const evidence = flowed(190, [sheetEvidence('18_tallowin_int_final_four_cylinders.csv', 190)])
    const [spread] = of({ ...evidence, photos: allPhotos(evidence) }, 'FF-04', 'intake')
    // sheets/README: 4.0 % at 0.450 in, cylinder 3 about -3.5 %, borderline with U 0.9.
    expect(spread?.value).toBeCloseTo(4, 1)
    expect(spread).toMatchObject({ state: 'borderline', liftMm: expect.closeTo(11.43, 6) })
    expect(spread?.text).toMatch(/^Cylinder 3 is 3\.\d % down\./)
  })
  it('reads how much of a range was used where the sheet says (10), and says so where it does not', () => {
    const [used] = of(flowed(100, [sheetEvidence('10_pellam_int_baseline_leaking.csv', 100)]), 'FB-08', 'intake')
    // The largest figure of the sheet's thousandths column, at a lift: 776.5 at 150 thou.
    expect(used).toMatchObject({ state: 'accept', value: expect.closeTo(77.65, 9), liftMm: expect.closeTo(3.81, 6) })
    expect(of(flowed(100, [usual]), 'FB-08', 'intake')[0]).toMatchObject({ state: 'not-assessed' })
  })
  it('corrects by the plate and says how far the bench was off', () => {
    const [plate] = judgeCriterion(criterionOf('B-05'), flowed(30, [usual]))
    // expected.json: plate ratio 1.00133.
    expect(plate?.value).toBeCloseTo(0.133, 2)
    expect(plate?.state).toBe('accept')
  })
})

describe('nine chances to be unlucky', () => {
  /** Share of sheets without any real change that the rule calls each way. */
  function simulate(sheets: number) {
    const normal = seededNormal(20260326)
    const counts = { accept: 0, borderline: 0, reject: 0, anyLost: 0, anySure: 0 }
    for (let n = 0; n < sheets; n++) {
      // U is two standard deviations, so a change of no change is normal with 0.5.
      const changes = Array.from({ length: 9 }, (_, index): LiftChange => ({ liftMm: index + 1, nowCfm28: 100, beforeCfm28: 100, changeCfm: normal() / 2, expandedUncertainty: 1, changePercent: 0, expandedUncertaintyPercent: 1, verdict: 'no clear change', trace: [] }))
      counts[flowLossVerdict(changes).state] += 1
      if (changes.some(change => change.changeCfm < -1)) counts.anyLost += 1
      if (changes.some(change => change.changeCfm < -1.4)) counts.anySure += 1
    }
    return counts
  }

  it('would lose a lift by chance on a fifth of all sheets, and reject few of them', () => {
    const sheets = 20_000
    const counts = simulate(sheets)
    // 1 - (1 - 0.02275)^9 = 0.187 one-sided at k = 2 (the handbook rounds to 0.975 and says 20 %); 1 - (1 - 0.00256)^9 = 0.0228 at k = 2.8.
    expect(counts.anyLost / sheets).toBeCloseTo(0.187, 1)
    expect(Math.abs(counts.anySure / sheets - 0.0228)).toBeLessThan(0.005)
    // Rejected: one beyond 1.4 U (0.0228) or two neighbours beyond U (about 8 x 0.02275^2 = 0.004).
    expect(counts.reject / sheets).toBeGreaterThan(0.018)
    expect(counts.reject / sheets).toBeLessThan(0.033)
    expect(counts.borderline / sheets).toBeGreaterThan(0.13)
  })
})
