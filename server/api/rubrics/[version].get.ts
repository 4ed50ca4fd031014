import { z } from 'zod'
import { viewRubric } from '#server/services/rubrics/view-rubric'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'One version of the rubric, whole.',
  params: z.object({ version: z.coerce.number().int().min(1).max(1_000_000) }),
}, async ({ em, params }) => viewRubric(em, params.version))
