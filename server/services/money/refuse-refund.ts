import type { EntityManager } from '@mikro-orm/postgresql'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Refund } from '#server/db/entities/Refund'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { refundWent } from './refund-went'

/**
 * The card processor will not send a refund: it keeps its words and stands on the office's list. What was decided with it and did go
 * need not wait for it any longer to be told. The row is held by the caller.
 */
export async function refuseRefund(tx: EntityManager, app: App, refund: Refund, { problem, providerId }: { problem: string | null, providerId: string | null }): Promise<void> {
  if (refund.state === 'refused') return
  Object.assign(refund, { state: 'refused', problem: problem ?? 'The card processor gave no reason.', providerId })
  recordEvent(tx, { actor: 'job', action: 'refund-refused', subject: `place:${refund.place.id}`, detail: { refund: refund.id, provider: providerId } })
  await tx.flush()
  const others = await tx.find(Refund, { place: refund.place.id, decidedAt: refund.decidedAt, id: { $ne: refund.id }, payment: { $ne: null }, tries: 0, state: 'sent' })
  const gone = await tx.findOne(LedgerLine, { refund: { $in: others.map(one => one.id) } })
  const told = others.find(one => one.id === gone?.refund?.id)
  if (gone && told) await refundWent(tx, app, told, gone)
}
