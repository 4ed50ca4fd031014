import { setTimeout as wait } from 'node:timers/promises'
import { BenchPlace } from '../../server/db/entities/BenchPlace'
import type { User } from '../../server/db/entities/User'
import { quoteRefund } from '../../server/services/money/quote-refund'
import { cancelPlace } from '../../server/services/places/cancel-place'
import { placeToken } from '../../server/services/places/place-link'
import type { App } from '../../server/utils/app'
import type { PayStandIn } from '../stand-ins/pay/start-pay'
import { cohortCode } from './make-school'
import type { OwnStack } from './own-stack'
import { patiently, post } from './patiently'

/** Who gives a place up waits this long for its deposit to be known. */
const bookedWithinMs = 8_000
const chance = (share: number) => Math.random() < share

/** One visitor from the ask to the deposit, patient with whatever does not answer. */
export async function visit({ app, url, pay }: OwnStack, corin: Pick<User, 'id'>, n: number): Promise<void> {
  const email = `visitor${n}@sallowbeck.example`
  // The school lets one network address ask ten times an hour: everybody has their own.
  const from = `127.${64 + Math.floor(n / 250)}.7.${1 + n % 250}`
  const call = (path: string, body: unknown = {}) => patiently(path, () => post(`${url}${path}`, body, from))
  await call(`/api/cohorts/${cohortCode}/asks`, { name: `Visitor Number${n}`, email })
  const place = await app.orm.em.fork().findOneOrFail(BenchPlace, { email })
  const token = placeToken(app, place)
  await call(`/api/place-links/${token}/open`)
  mixFaults(pay)
  const { url: page } = await call(`/api/place-links/${token}/pay`, { purpose: 'deposit' }) as { url: string }
  const press = (button: string) => fetch(`${page}/${button}`, { method: 'POST', redirect: 'manual' })
  if (chance(0.25)) await press(chance(0.5) ? 'declined' : 'insufficient')
  mixFaults(pay)
  await press('pay')
  if (chance(0.2)) await press('pay')
  // Somebody impatient goes on to pay again before any message came: there is nothing to pay, or the page says it is paid.
  if (chance(0.15)) await post(`${url}/api/place-links/${token}/pay`, { purpose: 'deposit' }, from).catch(() => undefined)
  if (chance(0.4)) await post(`${url}/api/payments/returned`, { token }, from).catch(() => undefined)
  if (n % 10 === 3) await giveUp(app, corin, place.id)
}

/** Switches on one fault or another, or none. What is left of an earlier one stays and meets somebody else. */
function mixFaults({ faults }: PayStandIn): void {
  const some = 1 + Math.floor(Math.random() * 3)
  const mixes: (() => void)[] = [
    () => (faults.webhooksLost += some), () => (faults.webhooksLost += 3), () => (faults.webhooksTwice += some), () => (faults.webhooksReversed += 3),
    () => Object.assign(faults, { webhooksLate: faults.webhooksLate + some, lateMs: 500 + Math.floor(Math.random() * 4000) }),
    () => (faults.api429Next += some), () => (faults.api500Next += some), () => (faults.responseLostNext += some), () => (faults.slowMs = Math.floor(Math.random() * 300)), () => (faults.slowMs = 0), () => undefined,
  ]
  mixes[Math.floor(Math.random() * mixes.length)]?.()
}

/** Waits until the deposit is known, gives the place up, and lets the worker send the money back. */
async function giveUp(app: App, corin: Pick<User, 'id'>, placeId: string): Promise<void> {
  const end = performance.now() + bookedWithinMs
  while ((await app.orm.em.fork().findOneOrFail(BenchPlace, { id: placeId })).state === 'offered') {
    // Its message was lost: the sweep books it, and nobody waits for that here.
    if (performance.now() > end) return
    await wait(500)
  }
  const { back } = await quoteRefund(app.orm.em.fork(), app, { id: placeId }, { cause: 'student' })
  await cancelPlace(app.orm.em.fork(), app, corin, placeId, { cause: 'student', seenMinor: back.minor, note: '' })
}
