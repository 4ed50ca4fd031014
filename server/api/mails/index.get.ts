import { listMails } from '#server/services/mail/list-mails'
import { defineRoute } from '#server/utils/define-route'
import { mailsQuery } from '#shared/contract/office'

export default defineRoute({
  access: ['admin'],
  summary: 'Messages the school wrote, with what became of each.',
  query: mailsQuery,
}, async ({ em, query }) => listMails(em, query))
