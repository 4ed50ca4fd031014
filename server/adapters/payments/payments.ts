/** Money at the card processor, in minor units. `reference` is what we called it when we asked. */
export interface RefundState {
  id: string
  chargeId: string | null
  intentId: string | null
  amountMinor: number
  currency: string
  at: Date
  /** `pending`: it is on its way. `failed`: the processor gave up, and says why in `problem`. */
  state: 'pending' | 'succeeded' | 'failed'
  problem: string | null
  reference: string | null
}

export interface ChargeState {
  id: string
  intentId: string | null
  amountMinor: number
  currency: string
  at: Date
  /** False for a try that was declined. */
  paid: boolean
  reference: string | null
  refunds: RefundState[]
}

export interface CheckoutState {
  sessionId: string
  reference: string | null
  status: 'open' | 'complete' | 'expired'
  paid: boolean
  url: string | null
  expiresAt: Date
  intentId: string | null
  /** Every try, the declined ones too, oldest first. */
  charges: ChargeState[]
}

export interface CheckoutOrder {
  /** The same at every try: the processor does the work once for a key and gives the first answer again. */
  key: string
  /** Ours, a Payment's id; comes back with everything that follows from it. */
  reference: string
  amountMinor: number
  currency: string
  /** What is paid for, as the payer reads it. */
  what: string
  email: string | null
  successUrl: string
  cancelUrl: string
  /** From 30 minutes to 24 hours ahead. */
  expiresAt: Date
}

/** What the processor told us happened. It carries ids only: whoever hears it asks for the rest. */
export interface PaymentMessage {
  id: string
  type: string
  at: Date
  /** Checkout session, charge, refund or intent it is about. */
  about: string | null
  /** Our Payment's id, where the processor says it. */
  reference: string | null
  intentId: string | null
}

/**
 * Card payments. The processor is another program, reached over a network: everything may be asked again with the same key.
 *
 * Each call throws {AdapterRefusal} `payments_unreachable` when there is no answer, or only "later", after some tries.
 */
export interface Payments {
  /** Opens a page of the processor's own. `refused` says in its words why it never will, with this key. */
  startCheckout: (order: CheckoutOrder) => Promise<{ state: 'open', sessionId: string, url: string, expiresAt: Date } | { state: 'refused', problem: string }>
  /** How it stands now, with every charge and refund. */
  readCheckout: (sessionId: string) => Promise<CheckoutState>
  /** The session with this reference, among those made since; null when there is none. */
  findCheckout: (reference: string, since: Date) => Promise<string | null>
  /** Shuts the page. One that is complete or expired already stays as it is. */
  expireCheckout: (sessionId: string) => Promise<void>
  /** Gives back part or all of a charge; never more than is left of it. `reference` is our Refund's id. */
  refund: (order: { chargeId?: string, intentId?: string, amountMinor: number, key: string, reference: string }) => Promise<RefundState | { state: 'refused', problem: string }>
  /**
   * Checks that a message is the processor's, whole, and new: the signature is over the bytes as they came.
   * @throws {AdapterRefusal} signature_invalid
   */
  readWebhook: (raw: Uint8Array, signature: string | undefined, now: Date) => PaymentMessage
  /** What happened since, oldest first. */
  listEvents: (since: Date) => Promise<PaymentMessage[]>
  /** Every charge since, oldest first, with its refunds. */
  listCharges: (since: Date) => Promise<ChargeState[]>
}
