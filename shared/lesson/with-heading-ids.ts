import type { LessonDocument, LessonNode } from '../contract/lesson-document'
import { headingAddress } from './heading-address'
import { textOf } from './text-of'

/**
 * The document with an address on every heading: its own where it has one, else its words; the second of the same gets "-2". A heading
 * keeps its address when its words change, so that notes and links to it hold.
 */
export function withHeadingIds(document: LessonDocument): LessonDocument {
  const taken = new Set<string>()
  const fresh = (wanted: string): string => {
    let id = wanted
    for (let n = 2; taken.has(id); n += 1) id = `${wanted}-${n}`
    taken.add(id)
    return id
  }
  // Addresses given before come first: a new heading of the same words must not take one that notes point at.
  const kept = new Map<LessonNode, string>()
  const headings: LessonNode[] = []
  const collect = (node: LessonNode): void => {
    if (node.type === 'heading') headings.push(node)
    node.content?.forEach(collect)
  }
  collect(document)
  for (const heading of headings) {
    const { id } = heading.attrs ?? {}
    if (typeof id === 'string' && id !== '' && !taken.has(id)) {
      kept.set(heading, id)
      taken.add(id)
    }
  }
  for (const heading of headings) if (!kept.has(heading)) kept.set(heading, fresh(headingAddress(textOf(heading))))
  const write = (node: LessonNode): LessonNode => ({
    ...node,
    ...(kept.has(node) ? { attrs: { ...node.attrs, id: kept.get(node) } } : {}),
    ...(node.content ? { content: node.content.map(write) } : {}),
  })
  return write(document) as LessonDocument
}
