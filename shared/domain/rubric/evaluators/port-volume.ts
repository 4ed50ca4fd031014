import { sectionVolume } from '../../geometry/section-volume'
import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { sectionsOf } from '../sections-of'
import { notRead } from '../spot-values'

/** Burette against the integral of the sections, per cent. Source: handbook 8.17. */
export const portVolume: Evaluator = (evidence, criterion, unit) => {
  const [fill] = readingsOf(evidence, { quantity: criterion.quantity, unit })
  if (!fill) return notRead(criterion.quantity, unit)
  const sections = sectionsOf(evidence, { cylinder: fill.cylinder ?? unit.cylinder, side: unit.side })
  if (sections.length < 3) return { notAssessed: 'There are no sections of this stage to hold the fill against.' }
  const burette = readingValue(fill, 'cc')
  const cc = sectionVolume(sections)
  const value = 100 * (burette.value / cc - 1)
  return {
    values: [{
      value, unit: '%', standardUncertainty: 100 * (burette.standardUncertainty ?? 0) / cc, degreesOfFreedom: null, at: null, liftMm: null,
      trace: [
        { what: 'volume of the sections, trapezium rule', sum: `${sections.length} sections, ${sections[0]?.stationMm} to ${sections[sections.length - 1]?.stationMm} mm`, gives: `${cc.toFixed(1)} cc` },
        { what: 'burette over sections', sum: `100 x (${burette.value.toFixed(1)} / ${cc.toFixed(1)} - 1)`, gives: `${value.toFixed(1)} %` },
      ],
    }],
  }
}
