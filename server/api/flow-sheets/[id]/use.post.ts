import { z } from 'zod'
import { useSheet } from '#server/services/flow-sheets/use-sheet'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Confirms the newest reading of a flow sheet as what the bench said.',
  params: idParams,
  body: z.object({}).strict(),
  keeps: true,
}, async ({ em, app, actor, params }) => useSheet(em, app, actor, params.id))
