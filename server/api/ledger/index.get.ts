import { listLedger } from '#server/services/money/list-ledger'
import { defineRoute } from '#server/utils/define-route'
import { ledgerQuery } from '#shared/contract/money'

export default defineRoute({
  access: ['admin'],
  summary: 'Lines of the ledger, searched and ordered, with the sums of all of them and what is still due.',
  query: ledgerQuery,
}, async ({ em, app, query }) => listLedger(em, app, query))
