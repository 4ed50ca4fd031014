import { Refusal } from '#server/utils/refusal'
import type { LessonDocument } from '#shared/contract/lesson-document'
import { checkDocument } from '#shared/lesson/check-document'

/** A document as it may be kept. @throws {Refusal} document_invalid with every mistake and where it is */
export function goodDocument(given: LessonDocument): LessonDocument {
  const { document, issues } = checkDocument(given)
  if (!document) throw new Refusal('document_invalid', undefined, { issues: issues.map(({ path, message }) => ({ path: path === '' ? 'document' : `document.${path}`, message })) })
  return document
}
