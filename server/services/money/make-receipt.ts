import { createHash } from 'node:crypto'
import { LockMode } from '@mikro-orm/core'
import { drawReceipt } from '#server/adapters/paper/receipt-paper'
import { Receipt } from '#server/db/entities/Receipt'
import { writeMail } from '#server/services/mail/write-mail'
import { schoolDetails } from '#server/services/school/school-details'
import type { App } from '#server/utils/app'
import { receiptNumber } from '#shared/contract/receipt-number'
import { receiptFacts } from './receipt-facts'
import { receiptLetter } from './receipt-letter'
import { receiptWords } from './receipt-words'

/**
 * Draws a receipt's paper, stores it, and then, in one transaction, keeps where it is and writes the letter it goes with. Stored before
 * it is said to be there, under a key of its own: run again after a crash, it writes the same bytes to the same key.
 */
export async function makeReceipt(app: App, receiptId: string): Promise<void> {
  const em = app.orm.em.fork()
  const receipt = await em.findOne(Receipt, { id: receiptId })
  if (!receipt || receipt.key) return
  const body = await drawReceipt(receiptWords(await schoolDetails(em), await receiptFacts(em, receiptId)))
  const key = `receipts/${receiptId}.pdf`
  await app.storage.put({ key, body, contentType: 'application/pdf' })

  await app.orm.em.fork().transactional(async (tx) => {
    const row = await tx.findOneOrFail(Receipt, { id: receiptId }, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (row.key) return
    Object.assign(row, { key, sha256: createHash('sha256').update(body).digest('hex') })
    const facts = await receiptFacts(tx, receiptId)
    if (!facts.payer) return
    await writeMail(tx, app, {
      key: `receipt:${receiptId}`,
      to: facts.payer,
      ...receiptLetter(app, facts, facts.payer),
      attachments: [{ filename: `${receiptNumber(row.number)}.pdf`, key, contentType: 'application/pdf' }],
    })
  })
}
