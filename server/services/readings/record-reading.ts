import type { EntityManager } from '@mikro-orm/postgresql'
import { Instrument } from '#server/db/entities/Instrument'
import { Reading } from '#server/db/entities/Reading'
import { User } from '#server/db/entities/User'
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
import { doubtOfReading } from './doubt-of-reading'
import { checkPortOfReading } from './port-of-reading'
import { quantityOfReading } from './quantity-of-reading'
import { refuseImplausible } from './refuse-implausible'
import { viewReading } from './view-reading'
import { whenTaken } from '#server/services/school/when-taken'

/**
 * Keeps readings of one quantity at one spot: the figures as typed, and beside them what they are in the quantity's base unit with the
 * instrument's doubt as it stands today. A reading may take the place of an earlier one of this submission, which is kept.
 *
 * @throws {Refusal} whatever `openForEvidence` refuses, quantity_unknown, port_not_on_head, instrument_unknown, instrument_unfit,
 *   input_invalid (with the figure and the reason), reading_not_plausible, reading_void_unknown, taken_in_future
 */
export async function recordReading(em: EntityManager, app: App, actor: Actor, submissionId: string, input: ReadingInput): Promise<ReadingView> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const { card } = submission.head.$.casting.$
    const stage = submission.head.$.rubric.$.rubric.stages.find(one => one.op === submission.op)
    const quantity = quantityOfReading(stage, input)
    const spot = spotOf(input.at ?? {})
    checkPortOfReading(stage, card, quantity, { cylinder: input.cylinder, side: input.side, spot })

    const instrument = await tx.findOne(Instrument, { code: input.instrument })
    if (!instrument) throw new Refusal('instrument_unknown')
    if (!instrument.quantities.includes(quantity.name)) throw new Refusal('instrument_unfit', `The ${instrument.name} does not read the ${quantity.is.title}.`)

    const typed = typedValues(quantity.is, input.unit, input.values)
    if (!typed.ok) throw new Refusal('input_invalid', typed.issues[0]?.message, { issues: typed.issues })
    refuseImplausible(quantity, typed.values, input.values, input.unit, { card, side: input.side })

    const reading = tx.create(Reading, {
      submission, quantity: quantity.name, cylinder: input.cylinder, side: input.side, at: spot === null ? null : { ...input.at, spot }, when: input.when ?? null,
      asTyped: input.values, unit: unitName(input.unit), values: typed.values, baseUnit: quantity.is.baseUnit, instrument, expandedU: doubtOfReading(instrument, typed.values, quantity.is.baseUnit),
      addedBy: tx.getReference(User, actor.id), takenAt: whenTaken(app, input.takenAt), recordedAt: app.clock.schoolNow(), voids: input.voids ?? null, voidedAt: null,
    })
    if (input.voids !== undefined) await voidReading(tx, submission.id, input.voids, reading.recordedAt)
    tx.persist(reading)
    recordEvent(tx, { actor: actor.id, action: 'reading-added', subject: `submission:${submission.id}`, detail: { reading: reading.id, quantity: quantity.name, ...(input.voids === undefined ? {} : { voids: input.voids }) } })
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return viewReading(await tx.findOneOrFail(Reading, { id: reading.id }, { populate: ['instrument', 'addedBy'] }))
  })
}

async function voidReading(tx: EntityManager, submissionId: string, id: string, at: Date): Promise<void> {
  const earlier = await tx.findOne(Reading, { id, submission: submissionId, voidedAt: null })
  if (!earlier) throw new Refusal('reading_void_unknown')
  earlier.voidedAt = at
}
