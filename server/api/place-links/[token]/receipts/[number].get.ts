import { sendRedirect } from 'h3'
import { saveLinkedReceipt } from '#server/services/places/save-linked-receipt'
import { definePublicRoute } from '#server/utils/define-public-route'
import { receiptLinkParams } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who has the mailed link may have paid before there was an account.',
  summary: 'Sends on to a 60 second address that saves a receipt of this place.',
  params: receiptLinkParams,
}, async ({ event, em, app, params }) => sendRedirect(event, await saveLinkedReceipt(em, app, params.token, params.number), 302))
