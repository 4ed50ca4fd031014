import { viewShopBoard } from '#server/services/review/view-shop-board'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['instructor', 'safety'],
  summary: 'Heads at work in the cohorts the caller teaches: who is held, for how long, and stops.',
}, async ({ em, app, actor }) => viewShopBoard(em, app, actor))
