import type { EntityManager } from '@mikro-orm/postgresql'
import { Instrument } from '#server/db/entities/Instrument'
import { Reading } from '#server/db/entities/Reading'
import { User } from '#server/db/entities/User'
import { takenWhen } from '#server/services/photos/taken-when'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { ReadingInput } from '#shared/contract/inputs'
import { typedValues, unitName } from '#shared/contract/typed-values'
import type { ReadingView } from '#shared/contract/views'
import { spotOf } from '#shared/domain/rubric/spot-of'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { instrumentDoubt } from './instrument-doubt'
import { quantityRead, type QuantityRead } from './quantity-read'
import { refuseImplausible } from './refuse-implausible'
import { refuseWrongPort } from './refuse-wrong-port'
import { viewReading } from './view-reading'

/** A phone's clock may run ahead this far, ms. */
const clockMayLead = 5 * 60_000

/**
 * Keeps repeats of one quantity at one spot, exactly as typed, and beside them the same in the base unit with the instrument's doubt of
 * that day. With `voids` it takes the place of an earlier reading, which stays and no longer counts.
 *
 * @throws {Refusal} whatever `openForEvidence` refuses, quantity_unknown, port_not_on_head, instrument_unknown, instrument_unfit,
 *   reading_not_plausible, reading_void_unknown; input_invalid with the code of each figure that cannot be read
 */
export async function recordReading(em: EntityManager, app: App, actor: Actor, submissionId: string, input: ReadingInput): Promise<ReadingView> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const { casting, rubric } = submission.head.$
    const { card } = casting.$
    const stage = stageAsDue(rubric.$.rubric, submission.op)
    const read = quantityRead(stage, input)
    refuseWrongPort(card, stage, read, input)
    refuseFuture(app, input.takenAt)
    const typed = typedValues(read.quantity, input.unit, input.values)
    if (!typed.ok) throw new Refusal('input_invalid', typed.issues[0]?.message, { issues: typed.issues })
    refuseImplausible(card, read, input.side, typed.values)
    const instrument = await fitInstrument(tx, input.instrument, read)
    if (input.voids !== undefined) await voidReading(tx, app, submission.id, input.voids)

    const spot = spotOf(input.at ?? {})
    const reading = tx.create(Reading, {
      submission, quantity: read.name, cylinder: input.cylinder, side: input.side, at: spot === null ? null : { ...input.at, spot }, when: input.when ?? null,
      asTyped: input.values, unit: unitName(input.unit), values: typed.values, baseUnit: read.quantity.baseUnit, instrument, expandedU: instrumentDoubt(instrument, typed.values, read.quantity.baseUnit),
      addedBy: tx.getReference(User, actor.id), takenAt: takenWhen(app, input.takenAt), recordedAt: app.clock.schoolNow(), voids: input.voids ?? null, voidedAt: null,
    })
    tx.persist(reading)
    await tx.flush()
    recordEvent(tx, { actor: actor.id, action: 'reading-added', subject: `submission:${submission.id}`, detail: { reading: reading.id, quantity: read.name, cylinder: input.cylinder, side: input.side, spot, asTyped: input.values, unit: reading.unit, voids: input.voids ?? null } })
    await afterEvidence(tx, app, submission)
    return viewReading(await tx.findOneOrFail(Reading, reading.id, { populate: ['instrument', 'addedBy'] }))
  })
}

function refuseFuture(app: Pick<App, 'clock'>, told: string | undefined): void {
  if (told === undefined || Date.parse(told) <= app.clock.now().getTime() + clockMayLead) return
  const message = 'That is later than now. Set the clock of this device right, or leave the time out.'
  throw new Refusal('input_invalid', message, { issues: [{ path: 'takenAt', code: 'in-the-future', message }] })
}

async function fitInstrument(tx: EntityManager, code: string, { name, quantity }: QuantityRead): Promise<Instrument> {
  const instrument = await tx.findOne(Instrument, { code })
  if (!instrument) throw new Refusal('instrument_unknown')
  if (!instrument.quantities.includes(name)) throw new Refusal('instrument_unfit', `The ${instrument.name} does not read the ${quantity.title}.`)
  return instrument
}

/** The submission is locked, so two corrections of one reading cannot both come through. */
async function voidReading(tx: EntityManager, app: Pick<App, 'clock'>, submissionId: string, id: string): Promise<void> {
  const earlier = await tx.findOne(Reading, { id, submission: submissionId })
  if (!earlier) throw new Refusal('reading_void_unknown')
  if (earlier.voidedAt) throw new Refusal('reading_void_unknown', 'That reading was replaced already. Look at what took its place.')
  earlier.voidedAt = app.clock.schoolNow()
}
