import { setResponseStatus } from 'h3'
import { addFlowSheet } from '#server/services/flow-sheets/add-flow-sheet'
import { defineRoute } from '#server/utils/define-route'
import { idParams, sheetInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Files a received upload as a flow sheet and reads it (201), or reads the same upload again with answers (200).',
  params: idParams,
  body: sheetInput,
  status: 201,
  keeps: true,
}, async ({ event, em, app, actor, params, body }) => {
  const { sheet, first } = await addFlowSheet(em, app, actor, params.id, body)
  setResponseStatus(event, first ? 201 : 200)
  return sheet
})
