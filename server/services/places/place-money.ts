import type { EntityManager } from '@mikro-orm/postgresql'
import type { Cohort } from '#server/db/entities/Cohort'
import type { PlaceState } from '#server/db/entities/BenchPlace'

/** What the ledger says was paid for a place, less what went back; renewals of access are not part of the price. */
export interface PlacePaid { depositMinor: number, balanceMinor: number, paidMinor: number }

export const nothingPaid: PlacePaid = { depositMinor: 0, balanceMinor: 0, paidMinor: 0 }

/** Sums of the ledger for these places; one that has no line is left out. */
export async function placeMoney(em: EntityManager, placeIds: readonly string[]): Promise<Map<string, PlacePaid>> {
  if (placeIds.length === 0) return new Map()
  const rows = await em.getConnection().execute<{ place_id: string, deposit: number, balance: number }[]>(
    `select place_id, coalesce(sum(amount_minor) filter (where purpose = 'deposit'), 0)::int as deposit, coalesce(sum(amount_minor) filter (where purpose = 'balance'), 0)::int as balance
       from ledger_line where place_id in (${placeIds.map(() => '?').join(', ')}) group by place_id`, [...placeIds], 'all', em.getTransactionContext())
  return new Map(rows.map(row => [row.place_id, { depositMinor: row.deposit, balanceMinor: row.balance, paidMinor: row.deposit + row.balance }]))
}

/** What is still to be paid for a place in that state, or null when nothing is. */
export function dueMinor(state: PlaceState, cohort: Pick<Cohort, 'priceMinor' | 'depositMinor'>, paid: PlacePaid): number | null {
  const wanted = state === 'offered' ? cohort.depositMinor : state === 'deposit-paid' || state === 'confirmed' || state === 'here' ? cohort.priceMinor : 0
  const due = wanted - paid.paidMinor
  return due > 0 ? due : null
}
