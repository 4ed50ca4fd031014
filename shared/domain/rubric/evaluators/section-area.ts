import { areaChanges } from '../../geometry/area-changes'
import type { Section } from '../../geometry/assert-sections'
import { pinch, type Pinch } from '../../geometry/pinch'
import { throatNetArea } from '../../geometry/throat-net-area'
import type { Evaluated } from '../../uncertainty/evaluated'
import type { Criterion } from '../criterion'
import type { EvidenceSet, Evaluation, Evaluator, JudgedUnit } from '../evidence'
import { portCard, sectionsOf, withoutBowl } from '../sections-of'
import { notRead, spotValues } from '../spot-values'

/**
 * The section schedule, asked four ways by the unit of the criterion: stations measured, the pinch (mm2), the area change per
 * 10 mm, and the pinch as a share of the throat's net area (%).
 *
 * Source: handbook 3.5, 8.1, 8.3.
 */
export const sectionArea: Evaluator = (evidence, criterion, unit) => {
  const sections = sectionsOf(evidence, unit)
  if (sections.length === 0) return notRead('section-area', unit)
  if (criterion.unit === 'stations') return stationsMeasured(evidence, unit, sections)
  const port = withoutBowl(evidence, unit, sections)
  const card = portCard(evidence, unit)
  const open = withoutBowl(evidence, unit, card.stations.map(stationMm => ({ stationMm, areaMm2: 1 })))
    .filter(one => !port.some(section => Math.abs(section.stationMm - one.stationMm) < 0.5)).map(one => `section area at station ${one.stationMm}`)
  if (port.length < 3) return { notAssessed: `Three sections outside the bowl are the least that shows a shape; still to do: ${open.join(', ')}.` }
  const missing = open.length === 0 ? {} : { missing: open }
  if (criterion.unit.includes('per 10 mm')) return { values: changes(port), ...missing }
  const found = pinch(port)
  return criterion.unit === '%' ? withMissing(shareOfThroat(evidence, criterion, unit, found), missing) : { values: [pinchValue(found)], ...missing }
}

function withMissing(evaluation: Evaluation, missing: { missing?: string[] }): Evaluation {
  return 'notAssessed' in evaluation ? evaluation : { ...evaluation, ...missing }
}

function stationsMeasured(evidence: EvidenceSet, unit: JudgedUnit, sections: readonly Section[]): Evaluation {
  const stations = portCard(evidence, unit).stations
  const open = stations.filter(station => !sections.some(section => Math.abs(section.stationMm - station) < 0.5))
  return {
    values: [{
      value: sections.length, unit: 'stations', standardUncertainty: null, degreesOfFreedom: null, at: null, liftMm: null,
      trace: [{ what: 'stations measured', sum: sections.map(section => section.stationMm).join(', '), gives: `${sections.length}` }],
    }],
    countsReadings: true,
    fill: (): Record<string, string> => open.length === 0 ? {} : { where: `station ${open.join(', ')}` },
  }
}

function pinchValue(found: Pinch): Evaluated {
  return {
    value: found.areaMm2, unit: 'mm2', standardUncertainty: found.areaUncertainty, degreesOfFreedom: null,
    at: `station ${found.fitted ? found.stationMm.toFixed(1) : found.stationMm}`, liftMm: null, trace: found.trace,
  }
}

function changes(port: readonly Section[]): Evaluated[] {
  return areaChanges(port).map(change => ({
    value: change.percentPer10Mm, unit: '%', standardUncertainty: null, degreesOfFreedom: null, at: `station ${change.fromMm}`, liftMm: null,
    trace: [{
      what: `area change, station ${change.fromMm} to ${change.toMm}`,
      sum: `100 x (${areaAt(port, change.toMm)} / ${areaAt(port, change.fromMm)} - 1) / (${change.toMm - change.fromMm} / 10)`,
      gives: `${change.percentPer10Mm.toFixed(1)} % per 10 mm, a cone of ${change.coneDeg.toFixed(1)} degrees`,
    }],
  }))
}

function areaAt(port: readonly Section[], stationMm: number): string {
  return (port.find(section => section.stationMm === stationMm)?.areaMm2 ?? 0).toFixed(0)
}

function shareOfThroat(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, found: Pinch): Evaluation {
  const read = spotValues(evidence, { ...criterion, unit: 'mm' }, unit, 'throat-diameter')
  if (read.length === 0) return notRead('throat-diameter', unit)
  const throatMm = read.reduce((sum, one) => sum + one.value, 0) / read.length
  const stemMm = evidence.casting.valves[unit.side ?? 'intake'].stem
  const net = throatNetArea(throatMm, stemMm)
  const value = 100 * found.areaMm2 / net
  return {
    values: [{
      value, unit: '%', standardUncertainty: value * found.areaUncertainty / found.areaMm2, degreesOfFreedom: null, at: `station ${found.stationMm.toFixed(1)}`, liftMm: null,
      trace: [
        ...found.trace,
        { what: 'throat less the stem', sum: `pi / 4 x (${throatMm.toFixed(2)}^2 - ${stemMm}^2)`, gives: `${net.toFixed(0)} mm2` },
        { what: 'pinch as a share of it', sum: `100 x ${found.areaMm2.toFixed(0)} / ${net.toFixed(0)}`, gives: `${value.toFixed(1)} %` },
      ],
    }],
  }
}
