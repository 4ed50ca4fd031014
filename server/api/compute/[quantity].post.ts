import { z } from 'zod'
import { computeByHand } from '#server/services/school/compute-by-hand'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Computes one quantity from its inputs, for checking by hand. Keeps nothing.',
  params: z.object({ quantity: z.string().min(1).max(80) }),
  body: z.record(z.string(), z.unknown()),
  maxBytes: 65_536,
}, async ({ params, body }) => computeByHand(params.quantity, body))
