import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { BenchPlace } from './BenchPlace'
import { id, instant } from './column'
import { User } from './User'

/** Who pays for a student. A sponsor has no account and gets e-mail. */
export const Sponsor = defineEntity({
  name: 'Sponsor',
  properties: {
    id: id(),
    organisation: p.string().length(160).unique(),
    contact: p.string().length(120),
    email: p.string().length(254),
    createdAt: instant(),
  },
})
export type Sponsor = InferEntity<typeof Sponsor>

/** A sponsor's order for one place. The place is held from the order, not from its payment. */
export const PurchaseOrder = defineEntity({
  name: 'PurchaseOrder',
  properties: {
    id: id(),
    place: () => p.manyToOne(BenchPlace).ref().unique(),
    sponsor: () => p.manyToOne(Sponsor).ref(),
    /** As the sponsor numbers it. */
    number: p.string().length(60),
    amountMinor: p.integer(),
    currency: p.string().length(3),
    receivedAt: instant(),
    /** Thirty days after. */
    dueAt: instant(),
    takenBy: () => p.manyToOne(User).ref(),
  },
  uniques: [{ properties: ['sponsor', 'number'] }],
})
export type PurchaseOrder = InferEntity<typeof PurchaseOrder>
