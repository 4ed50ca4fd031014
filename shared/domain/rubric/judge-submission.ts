import { metalLeft } from '../geometry/metal-left'
import type { Evaluated } from '../uncertainty/evaluated'
import { chanceOfAccept } from './chance-of-accept'
import { criteriaOfPart } from './covers'
import type { Criterion, CriterionState } from './criterion'
import { decide, type Decision } from './decide'
import { doesNotApplyBecause } from './does-not-apply'
import type { CriterionResult, Evaluation, Evaluator, EvidenceSet, Judge, JudgedUnit, Measured } from './evidence'
import { evaluatorOf } from './evaluators'
import { instructorGives } from './instructor-gives'
import { missingProof } from './missing-proof'
import { pickBands, type ResolvedBand } from './pick-band'
import { score, statesByCriterion } from './score'
import { sentence } from './sentence'
import { unitsOf } from './units-of'
import { whichDoubt } from './which-doubt'
import { word } from './word'
import { wallOfSpot } from './wall-of-spot'

/** A spot is a line, whatever its parts add up to. */
const longestAt = 120

/** Quantities of which metal may be taken until a least. */
const takenFrom = new Set(['wall-thickness', 'guide-boss-width', 'bore-line-margin'])

/**
 * Judges one submission: a result for every criterion due with the part, at every port, cylinder or head it is judged at.
 *
 * What applies is evaluated, held against its band by the decision rule, given its sentence, and scored. Nothing here is random and
 * nothing depends on the time, so the same evidence gives the same results wherever it is judged. Pass the stage through
 * `stageAsDue` first, so that what another stage owes at this point is judged with it.
 *
 * Source: handbook 3.1 to 3.6.
 */
export const judgeSubmission: Judge = (stage, evidence) => {
  const criteria = criteriaOfPart(stage, evidence.part)
  const results = criteria.flatMap(criterion => judgeCriterion(criterion, evidence))
  return {
    results,
    criteria: [...statesByCriterion(results)].map(([id, state]) => ({ id, state })),
    score: score(results, criteria),
    word: word(results, criteria),
  }
}

/** Results of one criterion. */
export function judgeCriterion(criterion: Criterion, evidence: EvidenceSet): CriterionResult[] {
  const because = doesNotApplyBecause(criterion, evidence)
  if (because !== null) return [empty(criterion, { cylinder: null, side: null }, 'does-not-apply', `Does not apply: ${because}.`)]
  const narrowed = { ...evidence, readings: readingsFor(criterion, evidence) }
  return unitsOf(criterion, narrowed).flatMap(unit => judgeUnit(criterion, narrowed, unit))
}

/** Quantities an evaluator may ask for beside those its criterion names. */
const askedForBeside = new Set(['valve-head-diameter', 'valve-stem-diameter', 'throat-diameter', 'seat-land', 'section-area', 'rig-pressure', 'plate-flow'])

/** A whole head has thousands of readings; a criterion looks through the few it can use. */
function readingsFor(criterion: Criterion, evidence: EvidenceSet): EvidenceSet['readings'] {
  const named = new Set([criterion.quantity, ...criterion.wants.map(want => want.quantity)])
  // Of what is only asked for beside, this stage's and the receiving stage's count, and shape-change names its own.
  return evidence.readings.filter(reading => named.has(reading.quantity) || (askedForBeside.has(reading.quantity) && (reading.op === evidence.op || reading.op === 10)))
}

function judgeUnit(criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit): CriterionResult[] {
  const given = instructorGives(criterion) ? givenState(criterion, evidence, unit) : null
  if (criterion.kind === 'judged') return [given ?? empty(criterion, unit, 'not-assessed', 'The instructor gives this one.')]
  const registered = evaluatorOf(criterion)
  if (!registered) return [empty(criterion, unit, 'not-assessed', `Not assessed in this version, because nothing here measures ${criterion.quantity}.`)]

  const evaluation = evaluated(registered.evaluate, criterion, evidence, unit)
  const missing = missingProof(criterion, evidence, unit)
  if ('notAssessed' in evaluation) {
    if (given !== null) return [given]
    // The reason has said already that there is no sheet.
    const others = missing.filter(one => !/^(?:\d+ x )?flow sheet/.test(one))
    const typed = isTypedForPhoto(criterion) ? ' It is measured from the photo; until the program does that, type the reading.' : ''
    return [empty(criterion, unit, 'not-assessed', `${evaluation.notAssessed}${typed}${others.length > 0 ? ` Still wanted: ${others.join('; ')}.` : ''}`)]
  }
  const wanted = evaluation.countsReadings === true ? proofWithoutReadings(criterion, evidence, unit) : [...new Set([...evaluation.missing ?? [], ...missing])]
  return pickBands(criterion, evidence.casting.scope, unit.side).flatMap((band) => {
    const values = evaluation.values.filter(value => isOfBand(value, band))
    const worst = worstOf(values, criterion, band, evaluation.verdict)
    return worst === null ? [] : [judged(criterion, evidence, unit, band, evaluation, worst, wanted)]
  })
}

/**
 * Figures that contradict each other (a sheet whose stem is thicker than its throat) make a domain function throw. That is no value
 * for this one criterion; the others are judged all the same.
 */
function evaluated(evaluate: Evaluator, criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit): Evaluation {
  try {
    return evaluate(evidence, criterion, unit)
  }
  catch (error) {
    if (error instanceof RangeError) return { notAssessed: `The figures contradict each other: ${error.message}.` }
    throw error
  }
}

/** A reading that is missing is part of the value here; photos and papers are still proof. */
function proofWithoutReadings(criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit): string[] {
  return missingProof({ ...criterion, wants: criterion.wants.filter(want => want.kind !== 'reading' || want.quantity !== criterion.quantity && !criterion.quantity.startsWith('valve')) }, evidence, unit)
}

/** Whether a value belongs to a band: its wall by name, its lift by the share the evaluator gave it. */
function isOfBand(value: Evaluated & { liftShare?: number }, band: ResolvedBand): boolean {
  if (band.liftShare !== null) return value.liftShare === band.liftShare
  if (band.at === null) return true
  const wall = value.at === null ? '' : wallOfSpot(value.at)
  return wall !== '' && (band.at.includes(wall) || wall.includes(band.at))
}

interface Worst { value: Evaluated, doubt: number | null, decision: Omit<Decision, 'state'> & { state: Decision['state'] | 'not-assessed' | 'does-not-apply' } }

const weight: Record<Decision['state'], number> = { reject: 2, borderline: 1, accept: 0 }

/** The value that decides: the worst state, and among equals the one nearest to (or furthest beyond) an end that is tested. */
function worstOf(values: readonly Evaluated[], criterion: Criterion, band: ResolvedBand, verdict: CriterionState | undefined): Worst | null {
  const all = values.map((value) => {
    const doubt = whichDoubt(criterion, value.value, value.standardUncertainty)
    const decision = decide(value.value, doubt, band, criterion.mustPass)
    const room = Math.min(
      band.lo === null || band.loKind === 'natural' ? Infinity : value.value - band.lo,
      band.hi === null || band.hiKind === 'natural' ? Infinity : band.hi - value.value,
    )
    return { value, doubt, decision, room }
  })
  const [worst] = all.sort((a, b) => weight[b.decision.state] - weight[a.decision.state] || a.room - b.room)
  if (!worst) return null
  // A verdict comes from a rule of its own; it has no side.
  return { ...worst, decision: verdict === undefined ? worst.decision : { state: verdict, end: null, beyond: null } }
}

function judged(criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit, band: ResolvedBand, measured: Measured, { value, doubt, decision }: Worst, wanted: readonly string[]): CriterionResult {
  // Metal that is gone does not come back with a photo: such a reject stands whatever else is missing.
  const gone = decision.state === 'reject' && decision.beyond === 'past' && criterion.mustPass
  const state = wanted.length > 0 && !gone ? 'not-assessed' : decision.state
  const limit = decision.end === 'low' ? band.lo : decision.end === 'high' ? band.hi : band.hi ?? band.lo
  const assessed = state === 'accept' || state === 'borderline' || state === 'reject'
  const text = assessed
    ? sentence(criterion, {
        state, end: decision.end, finding: measured.finding ?? null, value: value.value, expandedUncertainty: doubt, limit, at: value.at,
        fill: measured.fill?.({ state, value, limit }) ?? {}, plain: measured.plainAt?.includes(value.at ?? '') ?? false,
      })
    : ''
  const asked = wanted.length === 0 ? '' : `Still wanted: ${wanted.join('; ')}.`
  return {
    criterion: criterion.id,
    ...unit,
    at: value.at === null || value.at.length <= longestAt ? value.at : `${value.at.slice(0, longestAt - 1)}…`,
    liftMm: value.liftMm,
    state,
    value: value.value,
    unit: criterion.unit,
    expandedUncertainty: doubt,
    pConform: assessed ? chanceOfAccept(value.value, doubt, value.degreesOfFreedom, band) : null,
    metalLeft: assessed ? metalLeftOf(criterion, evidence, band, value, doubt, decision) : null,
    text: [text, asked].filter(part => part !== '').join(' '),
    trace: value.trace,
    band: {
      lo: band.lo, hi: band.hi, loKind: band.loKind, hiKind: band.hiKind, softLo: band.softLo, softHi: band.softHi, borrowedFrom: band.borrowedFrom,
      beyond: assessed ? decision.beyond : null,
    },
    typedForPhoto: isTypedForPhoto(criterion),
  }
}

function metalLeftOf(criterion: Criterion, evidence: EvidenceSet, band: ResolvedBand, value: Evaluated, doubt: number | null, decision: Worst['decision']): CriterionResult['metalLeft'] {
  if (!takenFrom.has(criterion.quantity) || band.loKind !== 'no-return' || band.lo === null || doubt === null || doubt === 0 || decision.state === 'reject') return null
  // The hull's lower end is the hard least: what lies between it and the accept least is the school's own margin.
  return metalLeft({ readingMm: value.value, expandedUncertainty: doubt, acceptLeastMm: band.lo, hardLeastMm: band.softLo ?? band.lo, handAllowanceMm: evidence.handAllowanceMm })
}

/** What an instructor gave. */
function givenState(criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit): CriterionResult | null {
  const given = evidence.judged.find(one => one.criterion === criterion.id
    && (one.cylinder === null || one.cylinder === unit.cylinder) && (one.side === null || one.side === unit.side))
  if (!given) return null
  const note = given.note.trim().replace(/\.$/, '')
  const text = sentence(criterion, {
    state: given.state, end: null, finding: null, value: null, expandedUncertainty: null, limit: null, at: null,
    fill: note === '' ? {} : { note: `${note}.` }, plain: true,
  })
  return { ...empty(criterion, unit, given.state, text.replace(/\.\.$/, '.')) }
}

/** Read by a person from the iron or the picture, where the criterion wants only the picture. */
function isTypedForPhoto(criterion: Criterion): boolean {
  return criterion.kind === 'photo-measured' && !criterion.wants.some(want => want.kind === 'reading')
}

function empty(criterion: Criterion, unit: JudgedUnit, state: CriterionState, text: string): CriterionResult {
  return {
    criterion: criterion.id, ...unit, at: null, liftMm: null, state, value: null, unit: criterion.unit, expandedUncertainty: null, pConform: null,
    metalLeft: null, text, trace: [], band: null, typedForPhoto: false,
  }
}
