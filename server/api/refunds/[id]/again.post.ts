import { z } from 'zod'
import { sendRefundAgain } from '#server/services/money/send-refund-again'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['admin'],
  summary: 'Asks the card processor again for a refund it refused.',
  params: idParams,
  body: z.object({}).strict(),
  keeps: true,
}, async ({ em, app, actor, params }) => sendRefundAgain(em, app, actor, params.id))
