import type { LessonDocument, LessonNode } from '../contract/lesson-document'

/** What a lesson shows from elsewhere: criteria of the rubric, pictures and films of the media list, other lessons it links to. Each once. */
export interface LessonUses { criteria: string[], pictures: string[], clips: string[], lessons: string[] }

/** Reads a document for what it shows from elsewhere. */
export function usesOf(document: LessonDocument): LessonUses {
  const uses = { criteria: new Set<string>(), pictures: new Set<string>(), clips: new Set<string>(), lessons: new Set<string>() }
  const visit = (node: LessonNode): void => {
    const { attrs = {} } = node
    if (node.type === 'limit') uses.criteria.add(String(attrs.criterion))
    if (node.type === 'figure' && typeof attrs.asset === 'string') uses.pictures.add(attrs.asset)
    if (node.type === 'clip') uses.clips.add(String(attrs.asset))
    for (const mark of node.marks ?? []) {
      const slug = /^\/lessons\/([a-z0-9-]+)/.exec(String(mark.attrs?.href ?? ''))?.[1]
      if (mark.type === 'link' && slug !== undefined) uses.lessons.add(slug)
    }
    node.content?.forEach(visit)
  }
  visit(document)
  return { criteria: [...uses.criteria], pictures: [...uses.pictures], clips: [...uses.clips], lessons: [...uses.lessons] }
}
