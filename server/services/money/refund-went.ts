import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { LedgerLine } from '#server/db/entities/LedgerLine'
import { Refund } from '#server/db/entities/Refund'
import { firstName } from '#server/services/mail/first-name'
import { refundWentLetter } from '#server/services/mail/templates/refund'
import { writeMail } from '#server/services/mail/write-mail'
import { placeLink } from '#server/services/places/place-link'
import type { App } from '#server/utils/app'
import { moneyText } from '#shared/contract/money'
import { schoolDay } from '#shared/contract/school-day'
import { dayInWords, daysBetween } from '#shared/domain/money/calendar-days'
import { payerOf } from './payer-of'

/**
 * A refund is in the ledger: tells its owner, with the rule and the sum. What was decided together and goes to cards is told together,
 * once the last of it went. May be called twice for one line: the letter is written once.
 */
export async function refundWent(tx: EntityManager, app: App, { id }: Pick<Refund, 'id'>, line: Pick<LedgerLine, 'kind'>): Promise<void> {
  await tx.flush()
  const refund = await tx.findOneOrFail(Refund, { id })
  const together = await decidedTogether(tx, refund)
  const gone = await tx.find(LedgerLine, { refund: { $in: together.map(one => one.id) } })
  if (gone.length < together.length) return
  const payer = await payerOf(tx, refund.place.id)
  if (!payer) return

  const place = await tx.findOneOrFail(BenchPlace, { id: refund.place.id }, { populate: ['cohort'] })
  const { startsOn, name: cohort } = place.cohort.$
  const cancelledOn = place.endedAt && schoolDay(place.endedAt)
  await writeMail(tx, app, {
    key: `refund:${together.map(one => one.id).sort()[0]}`,
    template: 'refund',
    to: payer,
    letter: refundWentLetter({
      first: firstName(payer.name),
      cohort,
      amount: moneyText({ minor: together.reduce((sum, one) => sum + one.amountMinor, 0), currency: refund.currency }),
      cancelled: cancelledOn ? { on: dayInWords(cancelledOn), daysBefore: daysBetween(cancelledOn, startsOn) } : null,
      why: refund.rule === 'by-hand' ? 'hand' : refund.rule === 'place-gone' ? 'place-gone' : 'rule',
      rule: refund.wording,
      sum: refund.sum,
      by: line.kind === 'card-refund' ? 'card' : 'bank',
      url: placeLink(app, place),
    }),
  })
}

/** What one decision sends to cards at the first try; anything else goes its own way and is told by itself. */
async function decidedTogether(tx: EntityManager, refund: Refund): Promise<Refund[]> {
  if (!refund.payment || refund.tries > 0) return [refund]
  return tx.find(Refund, { place: refund.place.id, decidedAt: refund.decidedAt, payment: { $ne: null }, tries: 0, state: { $ne: 'refused' } })
}
