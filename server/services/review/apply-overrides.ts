import { Override, type Review } from '#server/db/entities/Review'
import { User } from '#server/db/entities/User'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Refusal } from '#server/utils/refusal'
import type { ReviewInput } from '#shared/contract/inputs'
import type { Criterion } from '#shared/domain/rubric/criterion'
import { overrideRefusal } from '#shared/domain/rubric/override-refusal'
import { sameSpot } from '#shared/domain/rubric/same-spot'
import type { StandingRow } from './point-results'

type Wanted = ReviewInput['overrides'][number]

/**
 * Puts a person's states beside the machine's. Without a cylinder, side or spot an override is of every result it fits; those that
 * have the state already are left as they are.
 *
 * @returns the rows, each with the override that now counts
 * @throws {Refusal} override_outside for a criterion or spot the review has no result of; override_not_allowed with the rule's own sentence
 */
export function applyOverrides(tx: EntityManager, review: Review, rows: readonly StandingRow[], criteria: readonly Criterion[], wanted: readonly Wanted[], by: string, at: Date): StandingRow[] {
  const made = new Map<string, Override>()
  wanted.forEach((one, index) => {
    const path = `overrides.${index}`
    const criterion = criteria.find(known => known.id === one.criterion)
    const fitting = criterion ? fittingRows(rows, one) : []
    if (!criterion || fitting.length === 0) throw new Refusal('override_outside', undefined, { issues: [{ path, message: `${one.criterion} has no such result here` }] })
    const moved = fitting.filter(row => row.result.state !== one.state)
    if (moved.length === 0) throw new Refusal('override_not_allowed', `${one.criterion} is ${one.state} already.`, { issues: [{ path, message: 'changes nothing' }] })
    for (const { result } of moved) {
      const refusal = overrideRefusal({ criterion, from: result.state, to: one.state, reason: one.reason })
      if (refusal !== null) throw new Refusal('override_not_allowed', refusal, { issues: [{ path, message: refusal }] })
      if (made.has(result.id)) throw new Refusal('override_not_allowed', `${one.criterion} is overridden twice in one review.`, { issues: [{ path, message: 'given twice' }] })
      made.set(result.id, tx.create(Override, { review, result, state: one.state, reason: one.reason, by: tx.getReference(User, by), at }))
    }
  })
  tx.persist([...made.values()])
  return rows.map(row => ({ ...row, override: made.get(row.result.id) ?? row.override }))
}

function fittingRows(rows: readonly StandingRow[], one: Wanted): StandingRow[] {
  const ofCriterion = rows.filter(row => row.result.criterion === one.criterion)
  const byCylinder = narrow(ofCriterion, one.cylinder, row => row.result.cylinder ?? null, (a, b) => a === b)
  const bySide = narrow(byCylinder, one.side, row => row.result.side ?? null, (a, b) => a === b)
  return narrow(bySide, one.at, row => row.result.at ?? null, sameSpot)
}

/** Left out: any. Null: those that have none; any, where all have one. */
function narrow<Value>(rows: StandingRow[], given: Value | null | undefined, own: (row: StandingRow) => Value | null, same: (one: Value, other: Value) => boolean): StandingRow[] {
  if (given === undefined) return rows
  if (given === null) {
    const without = rows.filter(row => own(row) === null)
    return without.length > 0 ? without : rows
  }
  return rows.filter((row) => {
    const value = own(row)
    return value !== null && same(value, given)
  })
}
