import { z } from 'zod'

const uuid = z.string().uuid()

/** Whether a text from outside can be one of our ids: the database refuses to compare any other. */
export function isUuid(text: string | null | undefined): text is string {
  return uuid.safeParse(text).success
}
