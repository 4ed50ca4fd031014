import { getSchema } from '@tiptap/core'
import { lessonExtensions } from './lesson-extensions'

/** The grammar of a lesson document; it never changes while the program runs. */
export const lessonSchema = getSchema(lessonExtensions())
