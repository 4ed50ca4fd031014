import { idParams } from '#shared/contract/inputs'
import { nameInput } from '#shared/contract/office'
import { renamePerson } from '#server/services/people/rename-person'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Corrects a name.',
  params: idParams,
  body: nameInput,
  keeps: true,
}, async ({ em, actor, params, body }) => renamePerson(em, actor, params.id, body.name))
