import { z } from 'zod'

/** RFC 9457 problem details, with our stable code. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  code: z.string(),
  issues: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
}).passthrough()

export type Problem = z.infer<typeof problem>
