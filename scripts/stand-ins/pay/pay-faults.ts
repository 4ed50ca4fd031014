import type { Faults } from '../faults'

/**
 * Webhooks, counted in messages: `webhooksLost` are never sent, `webhooksTwice` come twice, `webhooksLate` come `lateMs` after,
 * `webhooksReversed` are held and then come last first. The API, counted in calls: `api429Next`, `api500Next` (nothing is done),
 * `responseLostNext` (it is done, and the line goes dead), `refundRefusedNext` (a refund is refused); `slowMs` before each answer.
 */
export type PayFaults = Faults<'webhooksLost' | 'webhooksTwice' | 'webhooksLate' | 'webhooksReversed' | 'lateMs' | 'api429Next' | 'api500Next' | 'responseLostNext' | 'refundRefusedNext' | 'slowMs'>
