import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { User } from '#server/db/entities/User'
import { balancePaid } from '#server/services/places/balance-paid'
import { depositPaid } from '#server/services/places/deposit-paid'
import { lockPlace } from '#server/services/places/lock-place'
import { notePlace } from '#server/services/places/note-place'
import { nothingPaid, placeMoney } from '#server/services/places/place-money'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { bankInput } from '#shared/contract/places'
import { schoolDay, startOfDay } from '#shared/contract/school-day'
import { issueReceipt } from './issue-receipt'

/**
 * Writes down money that came by bank for a place: what the bank's own statement says, by its reference, once. A deposit books the
 * place once all of it is there.
 *
 * @throws {Refusal} place_not_found, place_state, no_free_place, bank_reference_used, input_invalid for a day to come
 */
export async function takeBankPayment(em: EntityManager, app: App, actor: Pick<Actor, 'id'>, placeId: string, input: z.output<typeof bankInput>): Promise<LedgerLine> {
  if (input.on > schoolDay(app.clock.schoolNow())) throw new Refusal('input_invalid', undefined, { issues: [{ path: 'on', message: 'is still to come' }] })
  try {
    return await em.transactional(async (tx) => {
      const { place, cohort } = await lockPlace(tx, placeId)
      if (['cancelled', 'moved', 'stopped'].includes(place.state)) throw new Refusal('place_state')
      const line = tx.create(LedgerLine, {
        place, kind: 'bank', purpose: input.purpose, amountMinor: input.amountMinor, currency: cohort.currency, payment: null, refund: null, reference: input.reference,
        by: tx.getReference(User, actor.id), at: startOfDay(input.on), writtenAt: app.clock.schoolNow(),
      })
      tx.persist(line)
      notePlace(tx, place, actor, 'place-bank-payment', { line: line.id, purpose: input.purpose, minor: input.amountMinor, currency: cohort.currency })
      await tx.flush()
      const paid = (await placeMoney(tx, [place.id])).get(place.id) ?? nothingPaid
      const outcome = input.purpose === 'balance' ? await balancePaid(tx, app, place, line) : paid.depositMinor < cohort.depositMinor ? 'booked' : await depositPaid(tx, app, place, line)
      // The office knows what to do with the money; a place that is not there is not sold.
      if (outcome === 'no-place') throw new Refusal('no_free_place')
      await tx.flush()
      await issueReceipt(tx, app, line)
      return line
    })
  }
  catch (thrown) {
    if (thrown instanceof UniqueConstraintViolationException && String(thrown.message).includes('ledger_line_kind_reference_unique')) throw new Refusal('bank_reference_used')
    throw thrown
  }
}
