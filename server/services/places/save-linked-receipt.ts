import type { EntityManager } from '@mikro-orm/postgresql'
import { signReceipt } from '#server/services/money/sign-receipt'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { receiptNumber } from '#shared/contract/receipt-number'
import { findLinkedPlace } from './find-linked-place'
import { receiptsOfPlace } from './receipts-of-place'

/**
 * Address of a receipt for whoever has the link of the place it was paid for.
 *
 * @throws {Refusal} place_link_unknown, receipt_not_found, receipt_not_ready
 */
export async function saveLinkedReceipt(em: EntityManager, app: App, token: string, number: string): Promise<string> {
  const place = await findLinkedPlace(em, app, token)
  const receipt = (await receiptsOfPlace(em, place)).find(one => receiptNumber(one.number) === number)
  if (!receipt) throw new Refusal('receipt_not_found')
  return signReceipt(app, receipt)
}
