import { createHmac } from 'node:crypto'
import type { PayFaults } from './pay-faults'
import type { PayEvent, PayStore } from './pay-store'

/** How long to wait before each try, in ms. */
const waits = [0, 300, 1_000, 3_000, 8_000, 20_000, 60_000]
const answerWithinMs = 10_000
/** A handful that is to come in the wrong order is let go when the rest of it does not happen. */
const heldAtMostMs = 2_000

/** Sends events to whom they are for, signed, until they are taken; what was not taken when the process ended is sent by the next. */
export class Webhooks {
  private readonly held: PayEvent[] = []
  private readonly timers = new Set<NodeJS.Timeout>()
  private ended = false

  constructor(
    private readonly store: PayStore,
    private readonly secret: string,
    private readonly faults: PayFaults,
    private readonly now: () => Date,
    private readonly to: () => string | null,
  ) {}

  /** What an earlier process left. */
  resume(): void {
    for (const { id, state } of this.store.all('deliveries')) {
      const event = state === 'waiting' ? this.store.get('events', id) : undefined
      if (event) this.send(event, 0)
    }
  }

  take(events: readonly PayEvent[]): void {
    for (const event of events) this.takeOne(event)
  }

  private takeOne(event: PayEvent): void {
    const { faults } = this
    if (faults.webhooksLost > 0) {
      faults.webhooksLost--
      this.store.commit([['deliveries', { id: event.id, state: 'lost' }]])
      return
    }
    if (faults.webhooksReversed > 0) {
      faults.webhooksReversed--
      this.held.push(event)
      if (faults.webhooksReversed === 0) this.letGo()
      else this.later(heldAtMostMs, () => this.letGo())
      return
    }
    let wait = 0
    if (faults.webhooksLate > 0) {
      faults.webhooksLate--
      wait = faults.lateMs
    }
    this.later(wait, () => this.send(event, 0))
    if (faults.webhooksTwice > 0) {
      faults.webhooksTwice--
      this.later(wait, () => this.send(event, 0))
    }
  }

  /** One after the other, so that the order is really the wrong one. */
  private letGo(): void {
    this.held.splice(0).reverse().forEach((event, index) => this.later(index * 50, () => this.send(event, 0)))
  }

  private send(event: PayEvent, tries: number): void {
    const target = this.to()
    // Nobody has asked to be told yet: it waits for somebody, or for the next start.
    if (target === null || this.ended) return
    const body = JSON.stringify(event)
    const seconds = Math.floor(this.now().getTime() / 1000)
    const signature = createHmac('sha256', this.secret).update(`${seconds}.${body}`).digest('hex')
    fetch(target, {
      method: 'POST', body, redirect: 'manual', signal: AbortSignal.timeout(answerWithinMs),
      headers: { 'content-type': 'application/json; charset=utf-8', 'stripe-signature': `t=${seconds},v1=${signature}` },
    }).then(async (answer) => {
      // Read to its end, so that the line is free for the next.
      await answer.arrayBuffer()
      return answer.ok
    }).catch(() => false).then((taken) => {
      if (this.ended) return
      const wait = waits[tries + 1]
      if (taken) this.store.commit([['deliveries', { id: event.id, state: 'done' }]])
      else if (wait === undefined) this.store.commit([['deliveries', { id: event.id, state: 'given-up' }]])
      else this.later(wait, () => this.send(event, tries + 1))
    }).catch((thrown: unknown) => console.error('card payment stand-in:', thrown))
  }

  private later(ms: number, work: () => void): void {
    const timer = setTimeout(() => {
      this.timers.delete(timer)
      if (!this.ended) work()
    }, ms)
    this.timers.add(timer)
  }

  close(): void {
    this.ended = true
    for (const timer of this.timers) clearTimeout(timer)
  }
}
