import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { instant } from './column'

/** Every message of the card processor, once, by the id it gave it. */
export const PaymentEvent = defineEntity({
  name: 'PaymentEvent',
  properties: {
    /** The processor's id. */
    id: p.string().length(255).primary(),
    type: p.string().length(120),
    /** Checkout session, charge or refund it is about; null when it is about none of ours. */
    about: p.string().length(255).nullable(),
    happenedAt: instant(),
    receivedAt: instant(),
  },
})
export type PaymentEvent = InferEntity<typeof PaymentEvent>
