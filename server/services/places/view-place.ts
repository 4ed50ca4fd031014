import type { EntityManager } from '@mikro-orm/postgresql'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Receipt } from '#server/db/entities/Receipt'
import { Refund } from '#server/db/entities/Refund'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { User } from '#server/db/entities/User'
import { isUuid } from '#server/utils/is-uuid'
import { receiptNumber } from '#shared/contract/receipt-number'
import type { PlaceStep, PlaceView } from '#shared/contract/places'
import { findPlace } from './find-place'
import { historyWords } from './history-words'
import { dueMinor, nothingPaid, placeMoney } from './place-money'

/** A place with all that happened to it, for the office. @throws {Refusal} place_not_found */
export async function viewPlace(em: EntityManager, id: string): Promise<PlaceView> {
  const place = await findPlace(em, id)
  const cohort = place.cohort.$
  const amount = (minor: number) => ({ minor, currency: cohort.currency })
  const paid = (await placeMoney(em, [id])).get(id) ?? nothingPaid
  const due = dueMinor(place.state, cohort, paid)
  const order = await em.findOne(PurchaseOrder, { place: id }, { populate: ['sponsor'] })
  const lines = await em.find(LedgerLine, { place: id }, { orderBy: { at: 'asc', id: 'asc' } })
  const receipts = await em.find(Receipt, { line: { $in: lines.map(line => line.id) } })
  const refunds = await em.find(Refund, { place: id }, { orderBy: { decidedAt: 'asc', id: 'asc' } })
  const movedFrom = place.movedFromId ? await em.findOne(BenchPlace, { id: place.movedFromId }, { populate: ['cohort'] }) : null
  return {
    id, cohort: { code: cohort.code, name: cohort.name }, name: place.name, email: place.email, state: place.state, slot: place.slot ?? null, listNumber: place.listNumber ?? null,
    askedAt: place.askedAt?.toISOString() ?? null, heldUntil: place.heldUntil?.toISOString() ?? null,
    paid: amount(paid.paidMinor), due: due === null ? null : amount(due), sponsor: order?.sponsor.$.organisation ?? null,
    person: place.person ? { id: place.person.id, name: place.person.$.name } : null,
    note: place.note,
    history: await historyOf(em, place),
    ledger: lines.map((line) => {
      const receipt = receipts.find(one => one.line.id === line.id)
      return { id: line.id, at: line.at.toISOString(), kind: line.kind, purpose: line.purpose, amount: { minor: line.amountMinor, currency: line.currency }, reference: line.reference, receipt: receipt ? receiptNumber(receipt.number) : null }
    }),
    refunds: refunds.map(one => ({ id: one.id, amount: { minor: one.amountMinor, currency: one.currency }, rule: one.rule, wording: one.wording, sum: one.sum, state: one.state, problem: one.problem ?? null, decidedAt: one.decidedAt.toISOString() })),
    order: order && { number: order.number, sponsor: order.sponsor.$.organisation, amount: { minor: order.amountMinor, currency: order.currency }, dueAt: order.dueAt.toISOString() },
    movedFrom: movedFrom && { cohort: movedFrom.cohort.$.name, id: movedFrom.id },
    steps: stepsOf(place),
  }
}

async function historyOf(em: EntityManager, place: BenchPlace): Promise<PlaceView['history']> {
  const events = await em.find(AuditEvent, { subject: `place:${place.id}` }, { orderBy: { at: 'asc', id: 'asc' } })
  const people = await em.find(User, { id: { $in: [...new Set(events.map(event => event.actor).filter(isUuid))] } })
  return events.map(({ at, action, detail, actor }) => ({ at: at.toISOString(), what: historyWords(action, JSON.parse(detail) as Record<string, unknown>), by: people.find(one => one.id === actor)?.name ?? null }))
}

/** Steps of handbook 5.4 that a place may take by a button. What gives money back, moves or takes an order has its own form. */
export function stepsOf({ state }: Pick<BenchPlace, 'state'>): PlaceStep[] {
  const steps: Partial<Record<BenchPlace['state'], PlaceStep[]>> = {
    'asked': ['offer'], 'waiting-list': ['offer'], 'offered': ['withdraw-offer'], 'confirmed': ['here'], 'here': ['finish'],
  }
  return steps[state] ?? []
}
