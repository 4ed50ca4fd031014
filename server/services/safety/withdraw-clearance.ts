import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { ClearanceRow } from '#shared/contract/safety'
import { clearanceRow } from './list-clearances'

/** Takes a clearance back: from this moment stages that need the tool are shut to its person. @throws {Refusal} clearance_not_found or clearance_withdrawn */
export async function withdrawClearance(em: EntityManager, app: App, actor: Actor, id: string): Promise<ClearanceRow> {
  return em.transactional(async (tx) => {
    const clearance = await tx.findOne(Clearance, id, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!clearance) throw new Refusal('clearance_not_found')
    if (clearance.withdrawnAt) throw new Refusal('clearance_withdrawn')
    clearance.withdrawnAt = app.clock.schoolNow()
    recordEvent(tx, { actor: actor.id, action: 'clearance-withdrawn', subject: `clearance:${clearance.id}`, detail: { person: clearance.person.id, tool: clearance.tool } })
    await tx.flush()
    const row = await clearanceRow(tx, app, clearance.person.id)
    if (!row) throw new Refusal('clearance_not_found')
    return row
  })
}
