import type { Evaluated } from '../../uncertainty/evaluated'
import { wallSpots } from '../../geometry/wall-spots'
import type { Criterion } from '../criterion'
import type { EvidenceSet, Evaluation, Evaluator, JudgedUnit } from '../evidence'
import { allReadingsOf, readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { sameSpot } from '../same-spot'
import { notRead, readingsNow, whenNow } from '../spot-values'
import { wallOfSpot } from '../wall-of-spot'

/**
 * Walls: how many points of the map are read (points), the wall at each spot of the criterion's walls (mm), and the gauge against
 * the sawn section (mm difference). The judge takes the least.
 *
 * A set whose zero block reads differently at its end than at its start by more than the gauge's U is void: the map would be that
 * much kind or unkind.
 *
 * Source: handbook 2.10, 3.5, 8.9.
 */
export const wallThickness: Evaluator = (evidence, criterion, unit) => {
  if (criterion.unit === 'mm difference') return gaugeAgainstSection(evidence, unit)
  const drift = zeroDrift(evidence)
  if (drift !== null && criterion.wants.some(want => want.quantity === 'gauge-zero')) return { notAssessed: drift }
  return criterion.unit === 'points' ? pointsOfMap(evidence, criterion, unit) : wallsOf(evidence, criterion, unit)
}

function zeroDrift(evidence: EvidenceSet): string | null {
  const zeros = readingsOf(evidence, { quantity: 'gauge-zero' })
  const start = zeros.find(one => sameSpot(one.spot, 'start'))
  const end = zeros.find(one => sameSpot(one.spot, 'end'))
  if (!start || !end) return null
  const moved = readingValue(end, 'mm').value - readingValue(start, 'mm').value
  const limit = Math.max(start.expandedU, end.expandedU)
  return Math.abs(moved) <= limit ? null : `The gauge moved ${Math.abs(moved).toFixed(2)} mm on its zero block between start and end. Walls read since the last good zero do not count; read them again.`
}

function pointsOfMap(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit): Evaluation {
  const read = readingsNow(evidence, criterion, unit).filter(one => one.spot !== null)
  if (read.length === 0) return notRead(criterion.quantity, unit)
  const wanted = wallSpots(evidence.casting)
  const open = wanted.filter(({ side, spot }) => !read.some(one => one.side === side && sameSpot(one.spot, spot)))
  return {
    values: [{
      value: read.length, unit: 'points', standardUncertainty: null, degreesOfFreedom: null, at: null, liftMm: null,
      trace: [
        { what: 'points read, one a spot', sum: countsByWall(read.map(one => one.spot ?? '')), gives: `${read.length} points` },
        { what: 'spots of the casting card still open', sum: open.slice(0, 8).map(one => `${one.side}: ${one.spot}`).join('; ') || 'none', gives: `${open.length} of ${wanted.length}` },
      ],
    }],
    countsReadings: true,
  }
}

function countsByWall(spots: readonly string[]): string {
  const counts = new Map<string, number>()
  for (const spot of spots) counts.set(wallOfSpot(spot), (counts.get(wallOfSpot(spot)) ?? 0) + 1)
  return [...counts].map(([wall, count]) => `${wall} ${count}`).join(', ')
}

/**
 * Every reading on the walls the criterion names, spots beyond the wanted ones included: the least is the least wherever it was found.
 * A newer reading takes the place of an older one of the same gauge alone: a kinder gauge does not put metal back.
 */
function wallsOf(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit): Evaluation {
  const walls = new Set(criterion.wants.filter(want => want.quantity === criterion.quantity && want.per !== 'head').flatMap(want => (want.places ?? []).map(wallOfSpot)))
  const all = allReadingsOf(evidence, { quantity: criterion.quantity, unit, ...whenNow(evidence) }).filter(one => one.spot !== null && walls.has(wallOfSpot(one.spot)))
  const read = all.filter((one, index) => all.findIndex(other => other.instrument === one.instrument && other.cylinder === one.cylinder && other.side === one.side && sameSpot(other.spot, one.spot)) === index)
  if (read.length === 0) return notRead(criterion.quantity, unit)
  return { values: read.map(one => readingValue(one, 'mm')) }
}

/** Map reading less the sawn section at the same spot: above zero the gauge was kind. */
function gaugeAgainstSection(evidence: EvidenceSet, unit: JudgedUnit): Evaluation {
  const sections = readingsOf(evidence, { quantity: 'wall-thickness', unit })
  const values = sections.flatMap((section): Evaluated[] => {
    const [old] = evidence.readings.filter(one => one.quantity === 'wall-thickness' && one.op < evidence.op && one.cylinder === section.cylinder && one.side === section.side && sameSpot(one.spot, section.spot))
      .sort((a, b) => b.takenAt - a.takenAt)
    if (!old) return []
    const [gauge, sawn] = [readingValue(old, 'mm'), readingValue(section, 'mm')]
    return [{
      value: gauge.value - sawn.value, unit: 'mm', standardUncertainty: Math.hypot(gauge.standardUncertainty ?? 0, sawn.standardUncertainty ?? 0), degreesOfFreedom: null, at: section.spot, liftMm: null,
      trace: [{ what: 'gauge less section', sum: `${gauge.value.toFixed(2)} - ${sawn.value.toFixed(2)}`, gives: `${(gauge.value - sawn.value).toFixed(2)} mm` }],
    }]
  })
  return values.length === 0 ? { notAssessed: 'No spot of the section was read on the old map under the same name.' } : { values }
}
