import { setResponseHeader } from 'h3'
import { ledgerCsv } from '#server/services/money/ledger-csv'
import { defineRoute } from '#server/utils/define-route'
import { ledgerFilter } from '#shared/contract/money'

export default defineRoute({
  access: ['admin'],
  summary: 'The same lines of the ledger as a CSV file.',
  query: ledgerFilter,
}, async ({ event, em, query }) => {
  setResponseHeader(event, 'content-type', 'text/csv; charset=utf-8')
  setResponseHeader(event, 'content-disposition', 'attachment; filename="ledger.csv"')
  return ledgerCsv(em, query)
})
