import { describe, expect, it } from 'vitest'
import { criteriaOfPart, partsOfStage, portsOfPart } from '#shared/domain/rubric/covers'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { wantedOf } from '#shared/domain/rubric/wanted'
import { casting, nothing, reading, rubric, stageOf } from './school'

describe('parts of a stage', () => {
  it('follow the points that fall early', () => {
    expect(partsOfStage(stageOf('W'))).toEqual(['first', 'rest'])
    expect(partsOfStage(stageOf('T'))).toEqual(['before', 'rest'])
    expect(partsOfStage(stageOf('P'))).toEqual(['before', 'rest'])
    expect(partsOfStage(stageOf('FB'))).toEqual(['rest'])
    expect(partsOfStage(stageOf('V'))).toEqual(['first', 'rest'])
  })
  it('have the criteria their points name', () => {
    expect(criteriaOfPart(stageOf('T'), 'before').map(one => one.id)).toEqual(['T-01'])
    expect(criteriaOfPart(stageOf('P'), 'before').map(one => one.id)).toEqual(['P-01', 'P-01w'])
    expect(criteriaOfPart(stageOf('V'), 'first').map(one => one.id)).toEqual(['V-01', 'V-02'])
    expect(criteriaOfPart(stageOf('W'), 'first')).toEqual(stageOf('W').criteria)
    expect(criteriaOfPart(stageOf('T'), 'rest')).toHaveLength(5)
  })
  it('cover one port, one chamber, or all', () => {
    const dunnock = casting('D')
    expect(portsOfPart(stageOf('W'), 'first', dunnock, 2)).toEqual([{ cylinder: 2, side: 'intake' }])
    expect(portsOfPart(stageOf('C'), 'first', dunnock, 2)).toEqual([{ cylinder: 2, side: 'intake' }, { cylinder: 2, side: 'exhaust' }])
    expect(portsOfPart(stageOf('W'), 'rest', dunnock, 2)).toHaveLength(8)
    expect(portsOfPart(stageOf('T'), 'before', dunnock, 2)).toHaveLength(8)
    expect(portsOfPart(stageOf('W'), 'rest', casting('W'), 1)).toHaveLength(2)
    expect(() => portsOfPart(stageOf('W'), 'first', dunnock, 9)).toThrow(RangeError)
  })
  it('take in what another stage owes at their point', () => {
    expect(stageAsDue(rubric, 190).criteria.map(one => one.id)).toContain('D-02')
    expect(stageAsDue(rubric, 200).criteria.map(one => one.id)).not.toContain('D-02')
    expect(() => stageAsDue(rubric, 55)).toThrow(RangeError)
  })
})

describe('the wanted proof', () => {
  const evidence = nothing(70, { part: 'first' })

  it('asks for the same thing once, for every criterion that wants it', () => {
    const lands = wantedOf(stageOf('W'), evidence).filter(item => item.quantity === 'seat-land')
    expect(lands.map(item => item.spot)).toEqual(['12', '1:30', '3', '4:30', '6', '7:30', '9', '10:30'])
    expect(lands[0]).toMatchObject({ criteria: ['W-01', 'W-02'], count: 1, have: 0, cylinder: 1, side: 'intake', title: 'seat land at 12 o\'clock, cylinder 1 intake' })
  })
  it('asks only for the ports the part covers and the sides a criterion has', () => {
    const wanted = wantedOf(stageOf('W'), evidence)
    expect(wanted.filter(item => item.quantity === 'throat-diameter').map(item => item.side)).toEqual(['intake', 'intake', 'intake'])
    expect(wantedOf(stageOf('W'), nothing(70, { ports: [1, 2].map(cylinder => ({ cylinder, side: 'intake' })) })).filter(item => item.quantity === 'throat-diameter')).toHaveLength(6)
  })
  it('takes the largest count of several criteria', () => {
    const flow = wantedOf(stageOf('B'), nothing(30)).filter(item => item.kind === 'flow-sheet')
    expect(flow.map(item => [item.side, item.count])).toEqual([['intake', 3]])
    expect(flow[0]?.criteria).toEqual(['B-06', 'B-07', 'B-08'])
  })
  it('adds up what one criterion wants twice', () => {
    const rag = wantedOf(stageOf('V'), nothing(170)).find(item => item.view === 'view-10' && item.cylinder === null)
    expect(rag).toMatchObject({ count: 2, note: 'white rag; magnet in its bag (iron)' })
  })
  it('counts what is in, at the spot and the op', () => {
    const more = { ...evidence, readings: [reading('seat-land', '12', 1.6), reading('seat-land', '3', 1.6, { op: 30 }), reading('seat-land', '6', 1.6, { cylinder: 2 })] }
    const lands = wantedOf(stageOf('W'), more).filter(item => item.quantity === 'seat-land')
    expect(lands.map(item => item.have)).toEqual([1, 0, 0, 0, 0, 0, 0, 0])
  })
  it('lists the spots of the card still to read', () => {
    const schedule = wantedOf(stageOf('P'), nothing(110, { readings: [reading('section-area', 'station 30', 915, { op: 110, unit: 'mm2' })] })).find(item => item.quantity === 'section-area')
    expect(schedule?.spotsLeft).toEqual(['station 0', 'station 15', 'station 45', 'station 60', 'station 75', 'station 84', 'station 92'])
  })
  it('asks nothing of what does not apply, and not for what only some rigs allow', () => {
    expect(wantedOf(stageOf('K'), nothing(20, { acidCleaned: false })).some(item => item.quantity === 'rinse-ph')).toBe(false)
    expect(wantedOf(stageOf('K'), nothing(20, { acidCleaned: true })).some(item => item.quantity === 'rinse-ph')).toBe(true)
    expect(wantedOf(stageAsDue(rubric, 190), nothing(190)).filter(item => item.quantity === 'rig-pressure').map(item => item.spot)).toEqual(['cold 0 min', 'cold 10 min'])
    const slices = (part: 'first' | 'rest') => wantedOf(stageOf('W'), nothing(70, { part })).filter(item => item.view === 'view-9')
    expect(slices('first')).toHaveLength(2)
    expect(slices('rest')).toHaveLength(0)
  })
  it('wants nothing from after the cut before the first stroke', () => {
    const before = wantedOf(stageOf('T'), nothing(140, { part: 'before' }))
    expect(before.filter(item => item.kind === 'reading').map(item => item.when)).toEqual(['before', 'before', 'before', 'before', 'before'])
  })
})

describe('what the program will measure from a photo one day', () => {
  const evidence = nothing(60, { part: 'first', ports: [{ cylinder: 1, side: 'intake' }, { cylinder: 1, side: 'exhaust' }] })
  const typed = (given: typeof evidence) => wantedOf(stageOf('C'), given).filter(item => item.kind === 'reading' && item.quantity === 'bore-line-margin')

  it('is wanted as a typed reading besides, once a cylinder, and is in when one is read anywhere', () => {
    expect(typed(evidence)).toMatchObject([{ cylinder: 1, spot: null, have: 0, count: 1, criteria: ['C-01'] }])
    expect(typed({ ...evidence, readings: [reading('bore-line-margin', '8', 0.39, { op: 60, cylinder: 1, side: null })] })).toMatchObject([{ have: 1 }])
  })

  it('is asked of each side that has a band of its own, and never of a yes or no', () => {
    const wanted = wantedOf(stageOf('C'), evidence)
    expect(wanted.filter(item => item.quantity === 'shroud-gap').map(item => item.side)).toEqual(['intake', 'exhaust'])
    expect(wantedOf(stageOf('L'), nothing(40)).some(item => item.quantity === 'no-grind-hatching')).toBe(false)
  })
})

it('asks for a figure where the rubric measures without naming a reading', () => {
  expect(wantedOf(stageOf('H'), nothing(120, { ports: [{ cylinder: 1, side: 'exhaust' }] })).filter(item => item.quantity === 'floor-drop' && item.kind === 'reading')).not.toHaveLength(0)
})
