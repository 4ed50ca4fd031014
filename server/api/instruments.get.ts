import { listInstruments } from '#server/services/instruments/list-instruments'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The gauges of the school, what each reads and its doubt.',
}, async ({ em }) => listInstruments(em))
