import type { Node } from '@tiptap/pm/model'
import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'

/** Where the block of a path such as "content.3.content.0.attrs.alt" begins in the open document; null where there is none. */
export function positionOf(document: Node, path: string): number | null {
  const indexes = [...path.matchAll(/(?:^|\.)content\.(\d+)/g)].map(found => Number(found[1]))
  if (!indexes.length) return null
  let node = document
  let position = 0
  for (const [depth, index] of indexes.entries()) {
    if (index >= node.childCount) return null
    if (depth > 0) position += 1
    for (let before = 0; before < index; before++) position += node.child(before).nodeSize
    node = node.child(index)
  }
  // Words have no beginning of their own to put a cursor at: their paragraph has.
  return position
}

/** The document without the empty lines an editor leaves at its end; a lesson with nothing in it keeps one. */
export function withoutEmptyEnd(document: LessonDocument): LessonDocument {
  const content = [...(document.content ?? [])]
  const isEmpty = (node: LessonNode | undefined) => node?.type === 'paragraph' && !node.content?.length
  while (content.length > 1 && isEmpty(content.at(-1))) content.pop()
  return { ...document, content }
}
