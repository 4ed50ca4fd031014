import { resendMail } from '#server/services/mail/resend-mail'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['admin'],
  summary: 'Sends a message again, to the address its person has now.',
  params: idParams,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params }) => resendMail(em, app, actor, params.id))
