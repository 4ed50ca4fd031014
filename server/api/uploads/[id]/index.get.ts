import { findUpload } from '#server/services/uploads/find-upload'
import { signUpload } from '#server/services/uploads/sign-upload'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'One\'s own upload: its state, what storage has of it, and fresh signed addresses for the rest.',
  params: idParams,
}, async ({ em, app, actor, params }) => signUpload(app, await findUpload(em, actor, params.id)))
