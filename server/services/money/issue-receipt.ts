import type { EntityManager } from '@mikro-orm/postgresql'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Receipt } from '#server/db/entities/Receipt'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'

/** Held until the transaction ends: the next number is given when this one is kept or given up, so that none is left out. */
const numbersLock = 7_240_193

/**
 * Gives a ledger line of money that came in the next receipt number, and makes the paper and its letter a job. In the caller's
 * transaction. A line has one receipt: asked again, the answer is the one it has.
 *
 * Locks are taken cohort, place, numbers, in this order: call it last.
 */
export async function issueReceipt(tx: EntityManager, app: App, { id }: Pick<LedgerLine, 'id'>): Promise<Receipt> {
  await tx.flush()
  await tx.getConnection().execute('select pg_advisory_xact_lock(?)', [numbersLock], 'run', tx.getTransactionContext())
  const known = await tx.findOne(Receipt, { line: id })
  if (known) return known
  const line = await tx.findOneOrFail(LedgerLine, { id })
  if (line.kind !== 'card' && line.kind !== 'bank') throw new RangeError(`a line of kind ${line.kind} has no receipt`)

  const [last] = await tx.getConnection().execute<{ number: number }[]>('select coalesce(max(number), 0)::int as number from receipt', [], 'all', tx.getTransactionContext())
  const receipt = tx.create(Receipt, { number: (last?.number ?? 0) + 1, line, key: null, sha256: null, issuedAt: app.clock.schoolNow() })
  tx.persist(receipt)
  recordEvent(tx, { actor: 'job', action: 'receipt-issued', subject: `place:${line.place.id}`, detail: { receipt: receipt.id, number: receipt.number, line: line.id } })
  await tx.flush()
  await enqueue(app, tx, 'make-receipt', { receiptId: receipt.id })
  return receipt
}
