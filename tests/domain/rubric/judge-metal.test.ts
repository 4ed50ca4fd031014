import { describe, expect, it } from 'vitest'
import type { CriterionResult, EvidenceSet } from '#shared/domain/rubric/evidence'
import { judgeCriterion, judgeSubmission } from '#shared/domain/rubric/judge-submission'
import { allPhotos, casting, criterionOf, nothing, reading, rubric, stageOf } from './school'

const clocks = ['12', '1:30', '3', '4:30', '6', '7:30', '9', '10:30']
const walls = ['bowl, cylinder-wall side, upper', 'bowl, cylinder-wall side, lower', 'bowl, fore', 'bowl, aft']

/** Hold 4 on cylinder 1 intake: readings of a sound bowl, with every photo in. */
function bowl(change: (readings: EvidenceSet['readings']) => EvidenceSet['readings'] = all => all): EvidenceSet {
  const evidence = nothing(70, {
    part: 'first',
    readings: change([
      ...clocks.map(clock => reading('seat-land', clock, clock === '12' ? 1.62 : 1.7, { expandedU: 0.08, instrument: 'loupe' })),
      ...['12-6', '2-8', '4-10'].map(direction => reading('throat-diameter', direction, 36.5, { expandedU: 0.06 })),
      ...walls.map(spot => reading('wall-thickness', spot, spot === 'bowl, fore' ? 4.4 : 5, { expandedU: 0.15, instrument: 'wall gauge' })),
      reading('wall-thickness', 'one of these by the ultrasonic gauge', 4.5, { expandedU: 0.2 }),
    ]),
  })
  return { ...evidence, photos: allPhotos(evidence) }
}

function only(evidence: EvidenceSet, id: string): CriterionResult {
  const results = judgeCriterion(criterionOf(id), evidence)
  expect(results).toHaveLength(1)
  return results[0] as CriterionResult
}

const at = (quantity: string, spot: string, value: number) => (all: EvidenceSet['readings']) => all.map(one => one.quantity === quantity && one.spot === spot ? { ...one, values: [value] } : one)

describe('a bowl', () => {
  it('is judged at its least land, its mean throat and its thinnest wall', () => {
    const evidence = bowl()
    expect(only(evidence, 'W-01')).toMatchObject({ state: 'accept', value: 1.62, at: '12', expandedUncertainty: 0.08, cylinder: 1, side: 'intake' })
    // 36.5 / 41.0 of the casting card; the handbook's 3.5 says 89.0 ± 0.15.
    expect(only(evidence, 'W-03i').value).toBeCloseTo(89.02, 2)
    expect(only(evidence, 'W-03i')).toMatchObject({ state: 'accept' })
    expect(only(evidence, 'W-06')).toMatchObject({ state: 'accept', value: 4.4, at: 'bowl, fore' })
    // 4.40 - 0.15 - 4.0 - 0.15 = 0.10.
    expect(only(evidence, 'W-06').metalLeft).toMatchObject({ takeMm: 0.1, stopAtMm: 4 })
  })

  it('counts a wall read beside the wanted spots: the least is the least wherever it was found', () => {
    expect(only(bowl(all => [...all, reading('wall-thickness', 'bowl, under the guide', 4.02, { expandedU: 0.15 })]), 'W-06')).toMatchObject({ state: 'borderline', value: 4.02, at: 'bowl, under the guide' })
  })

  it('tells metal gone from metal still there', () => {
    const overCut = only(bowl(all => all.map(one => one.quantity === 'throat-diameter' ? { ...one, values: [37.4] } : one)), 'W-03i')
    expect(overCut).toMatchObject({ state: 'reject', band: { beyond: 'past' } })
    expect(overCut.text).toContain('past 90 %')
    const notYet = only(bowl(all => all.map(one => one.quantity === 'throat-diameter' ? { ...one, values: [34.5] } : one)), 'W-03i')
    expect(notYet).toMatchObject({ state: 'reject', band: { beyond: 'short' } })
    // (87.5 - 84.146) % of 41.0 mm is 1.375 mm.
    expect(notYet.text).toContain('About 1.4 mm of diameter to come')
    expect(only(bowl(at('seat-land', '6', 2.3)), 'W-01').state).toBe('accept')
    expect(only(bowl(all => all.map(one => one.quantity === 'seat-land' ? { ...one, values: [2.3] } : one)), 'W-01')).toMatchObject({ state: 'reject', band: { beyond: 'short' } })
  })

  it('judges the newest reading at a spot and keeps older stages out', () => {
    const evidence = bowl(all => [...all, reading('seat-land', '3', 1.3, { op: 30, expandedU: 0.08 }), reading('seat-land', '12', 1.55, { expandedU: 0.08, takenAt: 9e9 })])
    expect(only(evidence, 'W-01')).toMatchObject({ state: 'borderline', value: 1.55, at: '12' })
  })

  it('says first what a stop for a wall needs, and offers no metal', () => {
    const thin = only(bowl(at('wall-thickness', 'bowl, aft', 3.3)), 'W-06')
    expect(thin).toMatchObject({ state: 'reject', at: 'bowl, aft', metalLeft: null })
    expect(thin.text).toMatch(/^Pressure test before anything else\. This estimate has a doubt; the metal may be worse\. 3\.30 mm at bowl, aft/)
  })

  it('widens the doubt by repeats that scatter, with the degrees of freedom they have', () => {
    const result = only(bowl(all => all.map(one => one.spot === 'bowl, aft' ? { ...one, values: [4.1, 4.5, 4.3] } : one)), 'W-06')
    // u = √(0.075² + (0.2/√3)²) = 0.1377, worked by hand; 4.30 - 0.275 still clears 4.0.
    expect(result).toMatchObject({ state: 'accept', at: 'bowl, aft' })
    expect(result.expandedUncertainty).toBeCloseTo(0.2754, 4)
  })
})

describe('missing evidence', () => {
  it('is named, and is not assessed', () => {
    const two = only(bowl(all => all.filter(one => !(one.quantity === 'seat-land' && (one.spot === '3' || one.spot === '7:30')))), 'W-01')
    expect(two.state).toBe('not-assessed')
    expect(two.text).toBe('Still wanted: seat land at 3 o\'clock and 7:30.')
    expect(only({ ...bowl(), photos: [] }, 'W-01')).toMatchObject({ state: 'not-assessed', text: 'Still wanted: photo Seat close-up.' })
    expect(only(bowl(all => all.filter(one => one.quantity !== 'wall-thickness')), 'W-06').text).toContain('Nobody has read the wall thickness')
  })
  it('does not hide metal that is gone', () => {
    const evidence = bowl(all => at('wall-thickness', 'bowl, aft', 3.2)(all).filter(one => one.spot !== 'bowl, fore'))
    const result = only({ ...evidence, photos: [] }, 'W-06')
    expect(result.state).toBe('reject')
    expect(result.text).toContain('Still wanted: wall thickness at bowl, fore; photo Wall gauge at thinnest.')
    // A throat hardly opened can wait for its photo.
    expect(only({ ...bowl(all => all.map(one => one.quantity === 'throat-diameter' ? { ...one, values: [34] } : one)), photos: [] }, 'W-03i').state).toBe('not-assessed')
  })
  it('is not made up for by readings and photos that name no port', () => {
    const evidence = bowl()
    const nameless = { ...evidence, readings: evidence.readings.map(one => one.quantity === 'seat-land' ? { ...one, cylinder: null, side: null } : one) }
    expect(only(nameless, 'W-01').state).toBe('not-assessed')
    expect(only({ ...evidence, photos: evidence.photos.map(one => ({ ...one, side: null })) }, 'W-01').text).toBe('Still wanted: photo Seat close-up.')
  })
  it('never makes one criterion\'s contradiction stop the others', () => {
    const evidence = bowl(at('throat-diameter', '2-8', -3))
    expect(judgeSubmission(stageOf('W'), evidence).results.find(one => one.criterion === 'W-06')?.state).toBe('accept')
  })
})

describe('what applies', () => {
  it('covers the ports of the part and no others', () => {
    const ids = judgeSubmission(stageOf('W'), bowl()).results.map(one => one.criterion)
    expect(ids).toContain('W-03i')
    expect(ids).not.toContain('W-03e')
  })
  it('is told by the rubric alone', () => {
    const one = (id: string, more: Partial<EvidenceSet>) => judgeCriterion(criterionOf(id), nothing(110, more))[0]?.state
    expect(one('P-01', { casting: casting('W') })).toBe('does-not-apply')
    expect(one('P-01w', {})).toBe('does-not-apply')
    expect(one('K-02', { acidCleaned: false })).toBe('does-not-apply')
    expect(one('K-02', { acidCleaned: true })).toBe('not-assessed')
    expect(one('K-02', { acidCleaned: null })).toBe('not-assessed')
    expect(one('V-04', { casting: casting('W') })).toBe('does-not-apply')
  })
  it('gives a result for each wall that has a band of its own', () => {
    const evidence = nothing(110, {
      casting: casting('W'), part: 'before', ports: [{ cylinder: 1, side: 'exhaust' }],
      readings: [
        ...['stud boss 1', 'stud boss 2', 'stud boss 3'].map((spot, n) => reading('wall-thickness', spot, 4.6 - n / 10, { op: 110, side: 'exhaust', expandedU: 0.15 })),
        ...['fin root 1', 'fin root 2', 'fin root 3'].map((spot, n) => reading('wall-thickness', spot, 4.3 - n / 10, { op: 110, side: 'exhaust', expandedU: 0.15 })),
        ...['start', 'end'].map(spot => reading('gauge-zero', spot, 5, { op: 110, cylinder: null, side: null })),
      ],
    })
    const results = judgeCriterion(criterionOf('P-01w'), { ...evidence, photos: allPhotos(evidence) })
    expect(results.map(one => [one.at, one.value, one.state])).toEqual([['fin root 3', expect.closeTo(4.1, 9), 'accept'], ['stud boss 3', expect.closeTo(4.4, 9), 'accept']])
  })
  it('voids a map whose gauge moved off its zero block', () => {
    const evidence = nothing(110, {
      part: 'before',
      readings: [
        ...(criterionOf('P-01').wants[0]?.places ?? []).map(spot => reading('wall-thickness', spot, 4.6, { op: 110, expandedU: 0.15 })),
        reading('gauge-zero', 'start', 5, { op: 110, cylinder: null, side: null, expandedU: 0.15 }),
        reading('gauge-zero', 'end', 5.2, { op: 110, cylinder: null, side: null, expandedU: 0.15 }),
      ],
    })
    const all = { ...evidence, photos: allPhotos(evidence) }
    expect(only(all, 'P-01').state).toBe('not-assessed')
    expect(only(all, 'P-01').text).toContain('0.20 mm')
    expect(only({ ...all, readings: all.readings.map(one => one.spot === 'end' ? { ...one, values: [5.1] } : one) }, 'P-01')).toMatchObject({ state: 'accept', value: 4.6 })
  })
})

describe('sections and chambers', () => {
  const port = casting('D').intake_port
  const schedule = (areas: number[], op = 110) => areas.map((area, index) => reading('section-area', `station ${port.stations[index]}`, area, { op, unit: 'mm2', expandedU: 18 }))

  it('finds the pinch, the steepest change and the share of the throat', () => {
    const evidence = nothing(110, { readings: [...schedule(port.area_target), ...['12-6', '2-8', '4-10'].map(spot => reading('throat-diameter', spot, 36.5, { op: 110, expandedU: 0.06 }))] })
    const all = { ...evidence, photos: allPhotos(evidence) }
    // Handbook 3.5 and 8.1: 913 mm2 at 33.5; -3.8 % the steepest; 913 / 996 is 91.7 %.
    expect(only(all, 'P-02')).toMatchObject({ state: 'accept', at: 'station 33.5' })
    expect(only(all, 'P-02').text).toBe('Pinch is 913 mm2 at station 33.5.')
    expect(only(all, 'P-03').value).toBeCloseTo(-3.8, 1)
    expect(only(all, 'P-03')).toMatchObject({ state: 'accept', at: 'station 15' })
    expect(only(all, 'P-04').value).toBeCloseTo(91.7, 1)
  })
  it('wants every station outside the bowl', () => {
    const evidence = nothing(110, { readings: schedule(port.area_target).filter(one => one.spot !== 'station 45') })
    expect(only({ ...evidence, photos: allPhotos(evidence) }, 'P-02').text).toContain('section area at station 45')
  })
  it('matches chambers by the means of three fills', () => {
    const ports = [1, 2, 3, 4].map(cylinder => ({ cylinder, side: 'intake' as const }))
    const fills = [41.2, 41.0, 41.3, 40.7]
    const evidence = nothing(170, { ports, readings: fills.map((cc, index) => reading('chamber-volume', null, [cc, cc + 0.1, cc - 0.1], { op: 170, cylinder: index + 1, side: null, unit: 'cc', expandedU: 0.2 })) })
    const all = { ...evidence, photos: allPhotos(evidence) }
    const spread = only(all, 'V-04')
    expect(spread.value).toBeCloseTo(0.6, 9)
    expect(spread).toMatchObject({ state: 'borderline', cylinder: null, side: null })
    expect(judgeCriterion(criterionOf('V-05'), all).map(one => [one.cylinder, one.state])).toEqual([[1, 'accept'], [2, 'accept'], [3, 'accept'], [4, 'accept']])
    expect(only({ ...all, readings: all.readings.slice(1) }, 'V-04').text).toContain('cylinder 1')
  })
})

describe('everything else with a reading', () => {
  it('takes a drop from two gauge readings, in any pressure unit', () => {
    const rig = (start: number, end: number, unit: string) => nothing(20, { readings: [reading('rig-pressure', '0 min', start, { op: 20, cylinder: null, side: null, unit, expandedU: unit === 'kPa' ? 0.5 : 500 }), reading('rig-pressure', '10 min', end, { op: 20, cylinder: null, side: null, unit, expandedU: unit === 'kPa' ? 0.5 : 500 })] })
    for (const [start, end, unit, state] of [[160, 157, 'kPa', 'accept'], [160_000, 157_000, 'Pa', 'accept'], [160, 155.5, 'kPa', 'borderline'], [160, 140, 'kPa', 'reject'], [160, 161, 'kPa', 'accept']] as const) {
      const evidence = rig(start, end, unit)
      expect(only({ ...evidence, photos: allPhotos({ ...evidence, ports: [...evidence.ports, { cylinder: 2, side: 'intake' }] }) }, 'K-04').state).toBe(state)
    }
  })
  it('subtracts before and after the right way round', () => {
    const pair = (quantity: string, before: number, after: number, op: number, spot: string | null = null, side: 'intake' | 'exhaust' = 'intake') => nothing(op, { ports: [{ cylinder: 1, side }], readings: [reading(quantity, spot, before, { op, side, when: 'before' }), reading(quantity, spot, after, { op, side, when: 'after' })] })
    expect(only(pair('guide-length', 12, 11.3, 90), 'G-02').value).toBeCloseTo(0.7, 9)
    expect(only(pair('apex-height', 30.4, 30.1, 140), 'T-03').value).toBeCloseTo(0.3, 9)
    expect(only(pair('port-width', 32.9, 34, 90, 'guide station', 'exhaust'), 'G-05').value).toBeCloseTo(1.1, 9)
  })
  it('gives a judged criterion the state and the words of the instructor', () => {
    const evidence = nothing(10, { judged: [{ criterion: 'R-01', cylinder: null, side: null, state: 'borderline', note: 'the last digit cannot be read.' }] })
    expect(only(evidence, 'R-01')).toMatchObject({ state: 'borderline', text: 'Nearly: the last digit cannot be read.' })
    expect(only(nothing(10), 'R-01')).toMatchObject({ state: 'not-assessed', text: 'The instructor gives this one.' })
  })
  it('lets the instructor give a photo\'s yes or no where nobody typed it', () => {
    const judged = [{ criterion: 'L-06', cylinder: 1, side: null, state: 'accept' as const, note: 'hatched' }]
    expect(only(nothing(40, { judged }), 'L-06')).toMatchObject({ state: 'accept', text: 'Hatched and initialled. Nobody can say they did not know.' })
    const typed = nothing(40, { judged, readings: [reading('no-grind-hatching', null, 0, { op: 40, side: null, unit: 'yes/no' })] })
    expect(only({ ...typed, photos: allPhotos(typed) }, 'L-06').state).toBe('reject')
  })
  it('marks what a person typed for the photo', () => {
    const evidence = nothing(60, { readings: [reading('bore-line-margin', '8', 0.39, { op: 60, side: null, expandedU: 0.15 }), reading('bore-line-margin', '3', 0.9, { op: 60, side: null, expandedU: 0.15 })] })
    expect(only({ ...evidence, photos: allPhotos(evidence) }, 'C-01')).toMatchObject({ state: 'accept', value: 0.39, at: '8', typedForPhoto: true })
    expect(only(nothing(60), 'C-01').text).toContain('type the reading')
  })
  it('never leaves a brace, a NaN or an empty sentence, whatever is read', () => {
    // Every wanted reading of every stage with the same few figures, so that all states turn up.
    const ports = [{ cylinder: 1, side: 'intake' as const }, { cylinder: 1, side: 'exhaust' as const }]
    const states = new Set<string>()
    for (const scope of ['D', 'W'] as const) {
      for (const stage of rubric.stages) {
        for (const value of [0, 0.1, 0.4, 1, 1.6, 3.7, 5, 36, 42, 900]) {
          const wants = stage.criteria.flatMap(criterion => [...criterion.wants.filter(want => want.kind === 'reading'), { quantity: criterion.quantity, places: [null], when: undefined, count: 1 }])
          const readings = wants.flatMap(want => (want.places ?? casting(scope).intake_port.stations.map(station => `station ${station}`)).flatMap((spot, n) => ports.map(port => reading(want.quantity ?? '', spot, Array.from({ length: want.count }, () => value * (1 + n / 50)), { ...port, op: stage.op, when: want.when ?? null }))))
          const evidence = nothing(stage.op, { casting: casting(scope), ports, readings })
          for (const result of judgeSubmission(stage, { ...evidence, photos: allPhotos(evidence) }).results) {
            states.add(result.state)
            expect(result.text).not.toMatch(/[{}]|NaN|undefined|null|\[object/)
            expect(result.text.length).toBeGreaterThan(5)
            expect(result.text).not.toMatch(/\bsafe\b|\bcleared\b/i)
            for (const figure of [result.value, result.expandedUncertainty, result.pConform]) expect(figure === null || Number.isFinite(figure)).toBe(true)
            for (const step of result.trace) expect(`${step.what}${step.sum}${step.gives}`).not.toMatch(/NaN|undefined/)
          }
        }
      }
    }
    expect([...states].sort()).toEqual(['accept', 'borderline', 'does-not-apply', 'not-assessed', 'reject'])
  })
})

describe('a width read before and after', () => {
  it('is judged as it is now, even where the reading from before was typed later', () => {
    const evidence = nothing(90, { ports: [{ cylinder: 1, side: 'intake' }], readings: [
      reading('port-width', 'guide station', 42.3, { op: 90, when: 'after', takenAt: 1 }),
      reading('port-width', 'guide station', 39.4, { op: 90, when: 'before', takenAt: 2 }),
    ] })
    // The casting card's own widths: 39.4 as received, 42.3 to aim at.
    expect(judgeCriterion(criterionOf('G-03'), { ...evidence, photos: allPhotos(evidence) })[0]).toMatchObject({ value: 42.3, state: 'accept' })
  })
})

describe('a thin wall read again', () => {
  const again = (instrument: string) => bowl(all => [...all.map(one => one.spot === 'bowl, fore' ? { ...one, values: [3.31] } : one),
    reading('wall-thickness', 'bowl, fore', 5.1, { instrument, expandedU: 0.15 })])

  it('stands against a newer, kinder reading by another gauge', () => {
    expect(only(again('ultrasonic'), 'W-06')).toMatchObject({ state: 'reject', value: 3.31, at: 'bowl, fore' })
  })
  it('gives way to a newer reading by the same gauge', () => {
    expect(only(again('wall gauge'), 'W-06').state).toBe('accept')
  })
})
