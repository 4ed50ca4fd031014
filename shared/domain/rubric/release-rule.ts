import type { Side } from '../units/port'
import type { Criterion, CriterionState, RubricPoint, RubricStage } from './criterion'
import type { JudgedUnit } from './evidence'
import { spotInWords, unitInWords } from './words'

/** A result as it stands at the time of the release. */
export interface StandingResult {
  criterion: string
  cylinder: number | null
  side: Side | null
  at: string | null
  /** The machine's state. */
  state: CriterionState
  /** The person's state, where an override stands. */
  overriddenTo: CriterionState | null
}

/** Everything the release rule asks about. */
export interface ReleaseCase {
  point: RubricPoint
  /** All stages of the rubric; the point's `needs` name stages and criteria anywhere in it. */
  stages: readonly RubricStage[]
  /** Units each needed criterion must have a result for, as `neededUnits` gives them. */
  units: readonly { criterion: string, unit: JudgedUnit }[]
  results: readonly StandingResult[]
  /** Reasons typed for one criterion each; cylinder and side left out mean every result of it. */
  reasons: readonly { criterion: string, cylinder?: number | null, side?: Side | null, reason: string }[]
  /** Who is about to release. */
  by: string
  /** Whose work it is. */
  student: string
  /** Readings entered by others on the student's behalf; a flow sheet has the quantity "flow-sheet". */
  enteredOnBehalf: readonly { by: string, quantity: string, op: number }[]
  /** Who has released this point already. */
  signedBefore: readonly string[]
}

/** One thing that stands against a release. `criterion` is empty where the person is the reason. */
export interface ReleaseRefusal { criterion: string, cylinder: number | null, side: Side | null, at: string | null, state: CriterionState | null, why: string }

/** A condition the program adds by itself; it is shown until a newer reading accepts. */
export interface ReleaseCondition { criterion: string, cylinder: number | null, side: Side | null, at: string | null, text: string }

export interface ReleaseVerdict {
  allowed: boolean
  refused: ReleaseRefusal[]
  /** Musts that may be released once a reason is typed for each; while any is here the release is not allowed. */
  needReason: { criterion: string, cylinder: number | null, side: Side | null }[]
  conditions: ReleaseCondition[]
  /** Whether the point is open after this release, or waits for another person's. */
  complete: boolean
}

/**
 * Whether a person may release a point, what stands against it, and the conditions the program adds.
 *
 * At every unit of every criterion the point names: a *must* is accept, or does not apply, or is borderline or not assessed with a
 * reason typed for that one; a *stop* is accept, or does not apply, or is borderline, and then "no more cutting at ..." is added.
 * A rejected must, and a stop rejected or not assessed, cannot be released. Whoever entered a must's reading on the student's
 * behalf does not release on it. Nobody releases own work, or twice. A point with two signers is open after two different people.
 *
 * Source: handbook 3.4.
 */
export function releaseVerdict(asked: ReleaseCase): ReleaseVerdict {
  const needed = criteriaOfPoint(asked.point, asked.stages)
  const refused: ReleaseRefusal[] = personRefusals(asked, needed)
  const needReason: ReleaseVerdict['needReason'] = []
  const conditions: ReleaseCondition[] = []

  for (const result of standing(asked, needed)) {
    const criterion = needed.find(one => one.id === result.criterion)
    if (!criterion || !(criterion.mustPass || criterion.safetyStop)) continue
    const state = stateThatStands(criterion, result)
    if (state === 'accept' || state === 'does-not-apply') continue
    const where = whereOf(result)
    const refuse = (why: string) => refused.push({ criterion: criterion.id, cylinder: result.cylinder, side: result.side, at: result.at, state, why })
    if (criterion.safetyStop) {
      if (state === 'borderline') conditions.push({ criterion: criterion.id, cylinder: result.cylinder, side: result.side, at: result.at, text: `no more cutting at ${where}` })
      else refuse(state === 'reject' ? `${criterion.title}: rejected at ${where}, and it is a stop.` : `${criterion.title}: not assessed at ${where}, and it is a stop.`)
      continue
    }
    if (state === 'reject') refuse(`${criterion.title}: a must, rejected at ${where}.`)
    else if (!hasReason(asked, result)) needReason.push({ criterion: criterion.id, cylinder: result.cylinder, side: result.side })
  }
  const signers = new Set([...asked.signedBefore, asked.by])
  return {
    allowed: refused.length === 0 && needReason.length === 0,
    refused,
    needReason: needReason.filter((one, index) => needReason.findIndex(other => other.criterion === one.criterion && other.cylinder === one.cylinder && other.side === one.side) === index),
    conditions,
    complete: signers.size >= (asked.point.signersNeeded ?? 1),
  }
}

/** Criteria a point needs: whole stages by their code, single criteria by their id. */
export function criteriaOfPoint(point: RubricPoint, stages: readonly RubricStage[]): Criterion[] {
  return stages.flatMap(stage => stage.criteria.filter(criterion => point.needs.includes(stage.code) || point.needs.includes(criterion.id)))
}

/** Results that count, with a "not assessed" for every unit that has none. */
function standing(asked: ReleaseCase, needed: readonly Criterion[]): StandingResult[] {
  const ids = new Set(needed.map(criterion => criterion.id))
  const there = asked.results.filter(result => ids.has(result.criterion))
  const absent = asked.units.filter(({ criterion, unit }) => ids.has(criterion) && !there.some(result => result.criterion === criterion && isOfUnit(result, unit)))
  return [...there, ...absent.map(({ criterion, unit }): StandingResult => ({ criterion, ...unit, at: null, state: 'not-assessed', overriddenTo: null }))]
}

/** A result that does not apply stands for the head as a whole; a unit without a cylinder is met by any. */
function isOfUnit(result: StandingResult, unit: JudgedUnit): boolean {
  return (result.cylinder === null || unit.cylinder === null || result.cylinder === unit.cylinder)
    && (result.side === null || unit.side === null || result.side === unit.side)
}

/** An override cannot lift a stop, whoever let it through. */
function stateThatStands(criterion: Criterion, result: StandingResult): CriterionState {
  if (result.overriddenTo === null) return result.state
  if (!criterion.safetyStop || criterion.kind === 'judged') return result.overriddenTo
  const order: CriterionState[] = ['accept', 'borderline', 'not-assessed', 'reject']
  return order.indexOf(result.overriddenTo) < order.indexOf(result.state) ? result.state : result.overriddenTo
}

function hasReason(asked: ReleaseCase, result: StandingResult): boolean {
  return asked.reasons.some(one => one.criterion === result.criterion && one.reason.trim() !== ''
    && (one.cylinder === undefined || one.cylinder === null || one.cylinder === result.cylinder)
    && (one.side === undefined || one.side === null || one.side === result.side))
}

function personRefusals(asked: ReleaseCase, needed: readonly Criterion[]): ReleaseRefusal[] {
  const person = (why: string): ReleaseRefusal => ({ criterion: '', cylinder: null, side: null, at: null, state: null, why })
  const refusals: ReleaseRefusal[] = []
  if (asked.by === asked.student) refusals.push(person('Nobody releases their own work.'))
  if (asked.signedBefore.includes(asked.by)) refusals.push(person('You have released this point already; it takes another person.'))
  for (const criterion of needed.filter(one => one.mustPass)) {
    const op = asked.stages.find(stage => stage.criteria.includes(criterion))?.op
    const quantities = [criterion.quantity, ...criterion.wants.map(want => want.kind === 'flow-sheet' ? 'flow-sheet' : want.quantity)]
    const entered = asked.enteredOnBehalf.some(one => one.by === asked.by && quantities.includes(one.quantity)
      // What is due at another stage's point is read in that stage.
      && (one.op === op || criterion.dueAt === asked.point.code))
    if (entered) refusals.push({ criterion: criterion.id, cylinder: null, side: null, at: null, state: null, why: `${criterion.title}: you entered a reading of this must for the student, so somebody else releases on it.` })
  }
  return refusals
}

function whereOf(result: StandingResult): string {
  const unit = unitInWords(result)
  return result.at === null ? unit : `${spotInWords(result.at)}, ${unit}`
}
