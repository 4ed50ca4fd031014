import { idParams } from '#shared/contract/inputs'
import { rolesInput } from '#shared/contract/office'
import { changeRoles } from '#server/services/people/change-roles'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Gives a person these roles and no others.',
  params: idParams,
  body: rolesInput,
  keeps: true,
}, async ({ em, actor, params, body }) => changeRoles(em, actor, params.id, body.roles))
