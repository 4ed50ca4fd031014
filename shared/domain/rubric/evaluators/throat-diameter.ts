import { throatShare, type DoubtedDiameter } from '../../geometry/throat-share'
import type { Evaluated } from '../../uncertainty/evaluated'
import type { Criterion } from '../criterion'
import type { EvidenceSet, Evaluation, Evaluator, JudgedUnit, Measured } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { extreme, notRead, spotValues } from '../spot-values'
import { sameSpot } from '../same-spot'

/** Directions the throat is read in. */
const directions = ['12-6', '2-8', '4-10']

/** Two depths of one direction that differ by more than the out-of-round the school allows were not read alike. School design value (W-04). */
const agreeWithinMm = 0.3

/**
 * Throat, asked three ways: whether all six readings are there and agree (yes/no), as per cent of the valve head, and most less
 * least of the directions.
 *
 * Source: handbook 3.5.
 */
export const throatDiameter: Evaluator = (evidence, criterion, unit) => {
  if (criterion.unit === 'yes/no') return allSix(evidence, criterion, unit)
  const read = spotValues(evidence, { ...criterion, unit: 'mm' }, unit)
  if (read.length === 0) return notRead(criterion.quantity, unit)
  return criterion.unit === '%' ? shareOfValve(evidence, criterion, unit, read) : outOfRound(read)
}

function shareOfValve(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, read: readonly Evaluated[]): Evaluation {
  const valve = valveHead(evidence, unit)
  const share = throatShare(read.map(one => ({ mm: one.value, standardUncertainty: one.standardUncertainty ?? 0 })), valve)
  return {
    values: [{ ...share, trace: [...read.flatMap(one => one.trace), { what: valve.from, sum: 'as read', gives: `${valve.mm.toFixed(2)} mm` }, ...share.trace] }],
    fill: ({ limit, state }): Record<string, string> => state === 'accept' || limit === null ? {} : { todo: Math.max(0, (limit - share.value) / 100 * valve.mm).toFixed(1) },
  }
}

/** Head of the valve as measured at receipt; the card's nominal, with a maker's 0.02, where nobody measured it. */
function valveHead(evidence: EvidenceSet, unit: JudgedUnit): DoubtedDiameter & { from: string } {
  const [measured] = readingsOf(evidence, { quantity: 'valve-head-diameter', op: receivingOp, unit })
  if (measured) {
    const value = readingValue(measured, 'mm')
    return { mm: value.value, standardUncertainty: value.standardUncertainty ?? 0, from: `valve head, ${measured.instrument}` }
  }
  return { mm: evidence.casting.valves[unit.side ?? 'intake'].head, standardUncertainty: 0.01, from: 'valve head, casting card' }
}

/** Op the valves are measured at. */
const receivingOp = 10

function outOfRound(read: readonly Evaluated[]): Evaluation {
  const most = extreme(read, 'greatest')
  const least = extreme(read, 'least')
  if (!most || !least || read.length < 2) return { notAssessed: 'One direction says nothing about roundness; read the others.' }
  const value = most.value - least.value
  return {
    values: [{
      value, unit: 'mm', standardUncertainty: Math.hypot(most.standardUncertainty ?? 0, least.standardUncertainty ?? 0), degreesOfFreedom: null, at: most.at, liftMm: null,
      trace: [{ what: 'most less least of the directions', sum: `${most.value.toFixed(2)} (${most.at}) - ${least.value.toFixed(2)} (${least.at})`, gives: `${value.toFixed(2)} mm` }],
    }],
  }
}

/** Six readings a port, the two depths of each direction alike. */
function allSix(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit): Measured | { notAssessed: string } {
  const wanted = criterion.wants.find(want => want.quantity === criterion.quantity)?.places ?? []
  const read = spotValues(evidence, { ...criterion, unit: 'mm' }, unit).filter(one => wanted.some(place => sameSpot(place, one.at)))
  if (read.length === 0) return notRead(criterion.quantity, unit)
  const pairs = directions.flatMap((direction) => {
    const upper = read.find(one => sameSpot(one.at, `${direction} upper`))
    const lower = read.find(one => sameSpot(one.at, `${direction} lower`))
    return upper && lower ? [{ direction, upper: upper.value, lower: lower.value, differs: Math.abs(upper.value - lower.value) }] : []
  })
  const worst = [...pairs].sort((a, b) => b.differs - a.differs)[0]
  const complete = read.length >= wanted.length
  const agree = (worst?.differs ?? 0) <= agreeWithinMm
  return {
    values: [{
      value: complete && agree ? 1 : 0, unit: 'yes/no', standardUncertainty: null, degreesOfFreedom: null, at: worst?.direction ?? null, liftMm: null,
      trace: [
        ...read.flatMap(one => one.trace),
        { what: 'readings taken', sum: `${read.length} of ${wanted.length}`, gives: complete ? 'all' : 'not all' },
        ...(worst ? [{ what: 'two depths of one direction, the widest apart', sum: `${worst.upper.toFixed(2)} and ${worst.lower.toFixed(2)} at ${worst.direction}`, gives: `${worst.differs.toFixed(2)} mm` }] : []),
      ],
    }],
    verdict: !complete ? 'reject' : agree ? 'accept' : 'borderline',
    countsReadings: true,
    fill: () => ({ n: String(read.length), m: String(wanted.length), ...(worst ? { value: worst.differs.toFixed(2), where: worst.direction } : {}) }),
  }
}
