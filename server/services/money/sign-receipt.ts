import type { Receipt } from '#server/db/entities/Receipt'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { receiptNumber } from '#shared/contract/receipt-number'

/**
 * A 60 s address of a receipt's PDF, to be saved.
 *
 * @throws {Refusal} receipt_not_ready while the job that makes it has not run
 */
export async function signReceipt(app: Pick<App, 'storage'>, receipt: Pick<Receipt, 'key' | 'number'>): Promise<string> {
  if (!receipt.key) throw new Refusal('receipt_not_ready')
  return app.storage.signGet({ key: receipt.key, contentType: 'application/pdf', filename: `${receiptNumber(receipt.number)}.pdf`, disposition: 'attachment' })
}
