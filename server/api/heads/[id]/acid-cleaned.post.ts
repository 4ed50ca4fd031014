import { z } from 'zod'
import { sayAcidCleaned } from '#server/services/heads/say-acid-cleaned'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Says whether the core came from acid cleaning.',
  params: idParams,
  body: z.object({ acidCleaned: z.boolean() }).strict(),
  keeps: true,
}, async ({ em, app, actor, params, body }) => sayAcidCleaned(em, app, actor, params.id, body.acidCleaned))
