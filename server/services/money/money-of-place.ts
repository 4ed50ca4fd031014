import type { EntityManager } from '@mikro-orm/postgresql'
import type { PaymentPurpose } from '#server/db/entities/Payment'

/** What the school holds of one place, in minor units. */
export interface MoneyOfPlace {
  /** Paid or moved in, less what went back or is decided to. */
  held: Record<PaymentPurpose, number>
  /** What can still go back to a card, newest payment first: of this place, and of those it was moved from. */
  cards: { paymentId: string, purpose: PaymentPurpose, leftMinor: number }[]
  /** When the deposit was last paid, here or before a move; null when it never was. */
  depositPaidAt: Date | null
}

// A moved place brings the card payments of the one it was moved from: money goes back to the card that paid.
const chain = `with recursive chain as (
  select id, moved_from_id from bench_place where id = ?
  union all select p.id, p.moved_from_id from bench_place p join chain c on p.id = c.moved_from_id)`

/**
 * Reads it from the ledger, and from refunds decided that are not in the ledger yet. Lock the place first where something is decided on it.
 * A refused refund holds nothing back: its money is still here.
 */
export async function moneyOfPlace(em: EntityManager, placeId: string): Promise<MoneyOfPlace> {
  const run = <Row>(sql: string, values: unknown[]) => em.getConnection().execute<Row[]>(sql, values, 'all', em.getTransactionContext())
  const held = (await heldOfPlaces(em, [placeId])).get(placeId) ?? nothingHeld()

  const cards = await run<{ id: string, purpose: PaymentPurpose, left: number }>(`${chain}
    select p.id, p.purpose,
      (coalesce((select sum(l.amount_minor) from ledger_line l where l.payment_id = p.id and (l.kind = 'card' or (l.kind = 'card-refund' and l.refund_id is null))), 0)
        - coalesce((select sum(r.amount_minor) from refund r where r.payment_id = p.id and r.state <> 'refused'), 0))::int as left
    from payment p where p.place_id in (select id from chain) order by p.created_at desc, p.id`, [placeId])

  const [deposit] = await run<{ at: Date | null }>(`${chain} select max(at) as at from ledger_line where place_id in (select id from chain) and purpose = 'deposit' and kind in ('card', 'bank')`, [placeId])
  return {
    held,
    cards: cards.filter(card => card.left > 0).map(card => ({ paymentId: card.id, purpose: card.purpose, leftMinor: card.left })),
    depositPaidAt: deposit?.at ? new Date(deposit.at) : null,
  }
}

const nothingHeld = (): MoneyOfPlace['held'] => ({ deposit: 0, balance: 0, renewal: 0 })

/** What the school holds of some places: the ledger, less refunds decided that are not in it yet. One without money is left out. */
export async function heldOfPlaces(em: EntityManager, placeIds: readonly string[]): Promise<Map<string, MoneyOfPlace['held']>> {
  const ids = `{${placeIds.join(',')}}`
  const sums = await em.getConnection().execute<{ place_id: string, purpose: PaymentPurpose, minor: number }[]>(`
    select place_id, purpose, sum(minor)::int as minor from (
      select place_id, purpose, amount_minor as minor from ledger_line where place_id = any(?::uuid[])
      union all select r.place_id, r.purpose, -r.amount_minor from refund r where r.place_id = any(?::uuid[]) and r.state <> 'refused' and not exists (select 1 from ledger_line l where l.refund_id = r.id)
    ) as moved group by place_id, purpose`, [ids, ids], 'all', em.getTransactionContext())
  const held = new Map<string, MoneyOfPlace['held']>()
  for (const { place_id: id, purpose, minor } of sums) held.set(id, { ...held.get(id) ?? nothingHeld(), [purpose]: minor })
  return held
}
