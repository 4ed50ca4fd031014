import type { EntityManager } from '@mikro-orm/postgresql'
import { Receipt } from '#server/db/entities/Receipt'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { signReceipt } from './sign-receipt'

/**
 * A 60 s address of a receipt, for the office and for whoever's place it is.
 *
 * @param number as printed, "S-000123"
 * @throws {Refusal} receipt_not_found, receipt_not_ready
 */
export async function viewReceipt(em: EntityManager, app: Pick<App, 'storage'>, actor: Actor, number: string): Promise<{ url: string }> {
  const own = hasRole(actor, 'admin') ? {} : { line: { place: { person: actor.id } } }
  const receipt = await em.findOne(Receipt, { number: Number(number.slice(2)), ...own })
  if (!receipt) throw new Refusal('receipt_not_found')
  return { url: await signReceipt(app, receipt) }
}
