import { openMoney } from '#server/services/money/open-money'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'What is owed to the school, soonest first, and refunds that have not gone.',
}, async ({ em, app }) => openMoney(em, app))
