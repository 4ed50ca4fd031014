import type { EntityManager } from '@mikro-orm/postgresql'
import { Refund } from '#server/db/entities/Refund'
import type { App } from '#server/utils/app'
import type { OpenMoneyView } from '#shared/contract/money'
import { listDue } from './list-due'
import { heldOfPlaces } from './money-of-place'
import { refundViews } from './refund-view'

const most = 500

/** What is owed to the school, and refunds that were decided and have not gone: refused ones first, then the oldest. */
export async function openMoney(em: EntityManager, app: Pick<App, 'clock'>): Promise<OpenMoneyView> {
  const rows = await em.getConnection().execute<{ id: string }[]>(`
    select r.id from refund r where r.state = 'refused' or not exists (select 1 from ledger_line l where l.refund_id = r.id)
    order by (r.state = 'refused') desc, r.decided_at, r.id limit ${most}`)
  const refunds = await em.find(Refund, { id: { $in: rows.map(row => row.id) } })
  const ordered = rows.flatMap(row => refunds.find(one => one.id === row.id) ?? [])
  // A refused refund is over once its money went another way: the school does not hold that much any more.
  const held = await heldOfPlaces(em, ordered.filter(one => one.state === 'refused').map(one => one.place.id))
  const open = ordered.filter(one => one.state !== 'refused' || (held.get(one.place.id)?.[one.purpose] ?? 0) >= one.amountMinor)
  return { due: (await listDue(em, app)).slice(0, most), refunds: await refundViews(em, open) }
}
