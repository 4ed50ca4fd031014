import { sendRedirect } from 'h3'
import { viewReceipt } from '#server/services/money/view-receipt'
import { defineRoute } from '#server/utils/define-route'
import { receiptParams } from '#shared/contract/money'

export default defineRoute({
  access: ['student', 'admin'],
  summary: 'Sends on to a 60 second address of a receipt as PDF; one\'s own, or any for the office.',
  params: receiptParams,
}, async ({ event, em, app, actor, params }) => sendRedirect(event, (await viewReceipt(em, app, actor, params.number)).url, 302))
