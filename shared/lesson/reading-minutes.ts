import type { LessonDocument } from '../contract/lesson-document'
import { textOf } from './text-of'

/** Words a minute of a text one works after; common practice, no source. */
const wordsAMinute = 130

/** How long a lesson takes to read, whole minutes, at least one. */
export function readingMinutes(document: LessonDocument): number {
  return Math.max(1, Math.round(textOf(document).split(' ').length / wordsAMinute))
}
