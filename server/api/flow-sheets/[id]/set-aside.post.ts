import { z } from 'zod'
import { setSheetAside } from '#server/services/flow-sheets/set-sheet-aside'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Takes a flow sheet out of the evidence; it is kept and no longer counts.',
  params: idParams,
  body: z.object({}).strict(),
  keeps: true,
}, async ({ em, app, actor, params }) => setSheetAside(em, app, actor, params.id))
