import type { RubricPoint, RubricStage } from './criterion'
import { partOfPoint, partsOfStage } from './covers'
import type { SubmissionPart } from './evidence'
import { listInWords } from './words'

/** A person's release of a point. `shutAgain`: newer evidence contradicts it. `conditions`: those that still stand. */
export interface RouteRelease { point: string, by: string, at: number, conditions: string[], shutAgain: boolean }
export interface RouteCall { point: string, toldAt: number, waitUntil: number, seenAt: number | null, seenBy: string | null }
export interface RouteSubmission {
  id: string
  op: number
  part: SubmissionPart
  try: number
  state: 'draft' | 'asked' | 'scored' | 'decided'
  decision: 'release' | 'send-back' | 'stop' | null
  askedAt: number | null
  decidedAt: number | null
}

/** Everything the state of a head's route follows from. Times are milliseconds of the epoch, all by one clock. */
export interface RouteCase {
  stages: readonly RubricStage[]
  now: number
  headState: 'received' | 'working' | 'finished' | 'scrapped' | 'sawn'
  /** A head of one's own: measured along the same route, but nobody releases it, and neither clearance nor safety form of the school is asked for. */
  personal: boolean
  releases: readonly RouteRelease[]
  calls: readonly RouteCall[]
  /** Stops that stand. */
  stops: readonly { where: string, reason: string }[]
  /** Clearances of the student that were not withdrawn. */
  clearances: readonly { tool: string, from: number, until: number }[]
  /** Whether the student signed the safety form as it stands. `asked again`: a safety clause changed since. */
  consent: 'signed' | 'asked again' | 'none'
  submissions: readonly RouteSubmission[]
}

export type RoutePointState = 'shut' | 'asked' | 'released' | 'released with a condition' | 'sent back' | 'stopped' | 'told' | 'seen' | 'not seen'
export interface RoutePoint {
  code: string
  name: string
  kind: RubricPoint['kind']
  when: RubricPoint['when']
  state: RoutePointState
  /** When it came to that state, and by whom (a person's id). */
  at: number | null
  by: string | null
  conditions: string[]
  waitUntil: number | null
  /** Whether work behind it may go on. */
  letsOn: boolean
}
/** A part that is due: of which try, and the submission that is open for it already. */
export interface DuePart { part: SubmissionPart, point: string | null, try: number, submission: RouteSubmission | null }
export interface RouteStage {
  op: number
  code: string
  name: string
  state: 'shut' | 'open' | 'held' | 'done'
  why: string | null
  /** Set where something forbids work on it: what a refusal says. */
  shutBy: 'stage_not_open' | 'consent_missing' | 'clearance_missing' | 'head_stopped' | null
  points: RoutePoint[]
  due: DuePart | null
  /** Newest submission of the part that is due, else of the stage. */
  submission: RouteSubmission | null
}

/** "hold-4" as people say it: "Hold 4". */
export function pointName(code: string): string {
  const [kind = '', number = ''] = code.split('-')
  return `${kind.charAt(0).toUpperCase()}${kind.slice(1)} ${number}`.trim()
}

/** The point a part of a stage falls on; null when it is reviewed with a later one. A point whose part has nothing of its own falls on the rest. */
export function pointOfPart(stage: RubricStage, part: SubmissionPart): RubricPoint | null {
  const parts = partsOfStage(stage)
  return stage.points.find(point => (parts.includes(partOfPoint(point)) ? partOfPoint(point) : 'rest') === part) ?? null
}

/**
 * How every stage and point of a head stands, why, and which part is due.
 *
 * A stage is open when every earlier hold is released (by as many different people as it needs), every earlier witness point was
 * told and its wait is over, the clearances it names are valid, and no stop stands on the head. One that needs a tool needs the safety
 * form signed too. It is done when each of its parts
 * is: one with a hold when the hold is released, one with a witness point when that was told and waited for, one without a point
 * when it is scored. It is held while a point of it was asked or told and nothing else of it may be done. What is due is the first
 * part that is not done; sent back, it is due again as the next try.
 *
 * A scrapped head is shut, except for the stages only staff do (sectioning).
 *
 * Source: handbook 3.4; DESIGN, "Stages and points".
 */
export function routeState(route: RouteCase): RouteStage[] {
  const stages = route.personal ? route.stages.map(stage => ({ ...stage, points: [], clearances: [] })) : route.stages
  const all = stages.map(stage => ({ stage, points: stage.points.map(point => pointState(stage, point, route)) }))
  return all.map(({ stage, points }, index) => {
    const earlier = all.slice(0, index).flatMap(one => one.points)
    return stageState(stage, points, earlier, route)
  })
}

function stageState(stage: RubricStage, points: RoutePoint[], earlier: RoutePoint[], route: RouteCase): RouteStage {
  const due = duePart(stage, points, route)
  const base = { op: stage.op, code: stage.code, name: stage.name, points, due, submission: due?.submission ?? newestOf(route.submissions.filter(one => one.op === stage.op)) }
  const shut = whyShut(stage, earlier, route)
  // Done stays done whatever happens later, but evidence for it is not added behind a stop either.
  if (due === null) return { ...base, state: 'done', why: null, shutBy: shut?.shutBy ?? null }
  if (shut) return { ...base, state: 'shut', ...shut }
  const waiting = points.find(point => (point.state === 'asked' || point.state === 'told') && point.code === due.point)
  if (waiting) return { ...base, state: 'held', why: whyHeld(waiting), shutBy: null }
  return { ...base, state: 'open', why: null, shutBy: null }
}

function whyHeld(point: RoutePoint): string {
  return point.state === 'asked' ? `${point.name} is asked and not released yet.` : `${point.name} was told; wait until the person named has come or the wait is over.`
}

function whyShut(stage: RubricStage, earlier: readonly RoutePoint[], route: RouteCase): { why: string, shutBy: NonNullable<RouteStage['shutBy']> } | null {
  const byStaff = (stage.staffClearances ?? []).length > 0
  if (route.headState === 'sawn') return { why: 'This head is sawn.', shutBy: 'stage_not_open' }
  if (route.headState === 'scrapped') return byStaff ? null : { why: 'This head is scrapped. No more work is done on it.', shutBy: 'stage_not_open' }
  const [stop] = route.stops
  if (stop) return { why: `A stop stands on this head: ${stop.where}. ${stop.reason}`.trim(), shutBy: 'head_stopped' }
  const before = earlier.find(point => !point.letsOn)
  if (before) return { why: whyNotPast(before), shutBy: 'stage_not_open' }
  if (stage.clearances.length > 0 && route.consent !== 'signed') return { why: whyNotSigned(route.consent), shutBy: 'consent_missing' }
  const missing = stage.clearances.filter(tool => !route.clearances.some(one => one.tool === tool && one.from <= route.now && route.now < one.until))
  if (missing.length > 0) return { why: whyNotCleared(missing, route), shutBy: 'clearance_missing' }
  return null
}

function whyNotPast(point: RoutePoint): string {
  if (point.kind === 'hold') return point.state === 'shut' ? `${point.name} comes first.` : `${point.name} is ${point.state}, not released.`
  return point.state === 'told' ? `${point.name} was told; its wait is not over.` : point.state === 'sent back' || point.state === 'stopped' ? `${point.name} is ${point.state}.` : `${point.name} comes first: nobody was told of it yet.`
}

function whyNotSigned(consent: 'asked again' | 'none'): string {
  return consent === 'none' ? 'Sign the safety form first.' : 'The safety form changed since you signed it. Sign it again first.'
}

function whyNotCleared(missing: readonly string[], route: RouteCase): string {
  const lapsed = missing.filter(tool => route.clearances.some(one => one.tool === tool && one.until <= route.now))
  const names = (tools: readonly string[]) => listInWords(tools.map(tool => tool.replaceAll('-', ' ')))
  if (lapsed.length === missing.length) return `Your clearance for the ${names(lapsed)} has lapsed. See the safety officer.`
  return `You are not cleared for the ${names(missing)}. See the safety officer.`
}

function duePart(stage: RubricStage, points: readonly RoutePoint[], route: RouteCase): DuePart | null {
  for (const part of partsOfStage(stage)) {
    const point = pointOfPart(stage, part)
    const tries = route.submissions.filter(one => one.op === stage.op && one.part === part)
    const newest = newestOf(tries)
    const state = point === null ? null : points.find(one => one.code === point.code) ?? null
    if (isDone(state, newest)) continue
    const decided = newest?.state === 'decided'
    return { part, point: point?.code ?? null, try: newest === null ? 1 : decided ? newest.try + 1 : newest.try, submission: decided ? null : newest }
  }
  return null
}

function isDone(point: RoutePoint | null, newest: RouteSubmission | null): boolean {
  if (newest === null) return false
  // A first article that was told and waited for may be followed by the rest, decided or not.
  if (point !== null) return point.letsOn && newest.state !== 'draft'
  return newest.state === 'scored' || (newest.state === 'decided' && newest.decision === 'release')
}

function pointState(stage: RubricStage, point: RubricPoint, route: RouteCase): RoutePoint {
  const part = partsOfStage(stage).find(one => pointOfPart(stage, one)?.code === point.code) ?? 'rest'
  const tries = route.submissions.filter(one => one.op === stage.op && one.part === part)
  const base = { code: point.code, name: pointName(point.code), kind: point.kind, when: point.when, conditions: [], waitUntil: null }
  return point.kind === 'hold' ? { ...base, ...holdState(point, tries, route) } : { ...base, ...witnessState(point, tries, route) }
}

type Standing = Pick<RoutePoint, 'state' | 'at' | 'by' | 'letsOn'> & Partial<Pick<RoutePoint, 'conditions' | 'waitUntil'>>

function holdState(point: RubricPoint, tries: readonly RouteSubmission[], route: RouteCase): Standing {
  const standing = route.releases.filter(one => one.point === point.code && !one.shutAgain).sort((a, b) => a.at - b.at)
  const last = standing[standing.length - 1]
  if (last && new Set(standing.map(one => one.by)).size >= (point.signersNeeded ?? 1)) {
    const conditions = [...new Set(standing.flatMap(one => one.conditions))]
    return { state: conditions.length > 0 ? 'released with a condition' : 'released', at: last.at, by: last.by, conditions, letsOn: true }
  }
  const asked = newestOf(tries.filter(one => one.state !== 'draft'))
  const nothing: Standing = { state: 'shut', at: null, by: null, letsOn: false }
  if (asked === null) return nothing
  if (asked.state !== 'decided') return { ...nothing, state: 'asked', at: asked.askedAt }
  if (asked.decision === 'send-back') return { ...nothing, state: 'sent back', at: asked.decidedAt }
  if (asked.decision === 'stop') return { ...nothing, state: 'stopped', at: asked.decidedAt }
  // Decided by a first signer where two are needed, or released once and shut again by newer evidence.
  return standing.length > 0 ? { ...nothing, state: 'asked', at: asked.askedAt } : nothing
}

function witnessState(point: RubricPoint, tries: readonly RouteSubmission[], route: RouteCase): Standing {
  const call = route.calls.find(one => one.point === point.code)
  const asked = newestOf(tries.filter(one => one.state !== 'draft'))
  const nothing: Standing = { state: 'shut', at: null, by: null, letsOn: false }
  if (asked?.state === 'decided' && asked.decision === 'send-back') return { ...nothing, state: 'sent back', at: asked.decidedAt }
  if (asked?.state === 'decided' && asked.decision === 'stop') return { ...nothing, state: 'stopped', at: asked.decidedAt }
  if (!call) return nothing
  if (call.seenAt !== null) return { state: 'seen', at: call.seenAt, by: call.seenBy, letsOn: true }
  if (asked?.decision === 'release') return { state: 'seen', at: asked.decidedAt, by: null, letsOn: true }
  if (route.now < call.waitUntil) return { state: 'told', at: call.toldAt, by: null, waitUntil: call.waitUntil, letsOn: false }
  return { state: 'not seen', at: call.toldAt, by: null, waitUntil: call.waitUntil, letsOn: true }
}

function newestOf(submissions: readonly RouteSubmission[]): RouteSubmission | null {
  const parts: SubmissionPart[] = ['before', 'first', 'rest']
  return [...submissions].sort((a, b) => parts.indexOf(b.part) - parts.indexOf(a.part) || b.try - a.try)[0] ?? null
}
