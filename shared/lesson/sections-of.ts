import type { LessonDocument, LessonNode } from '../contract/lesson-document'
import { textOf } from './text-of'

/** A film, or part of one, in a lesson. `anchor` is its address on the page. */
export interface SectionClip { anchor: string, asset: string, start: number, end: number | null }
/** What stands under one heading. Before the first heading: no id, level 1 and no words. */
export interface Section { id: string, heading: string, level: number, body: string, clips: SectionClip[] }

/** A lesson by its headings, in order; `clip-1`, `clip-2` count the clips through the whole lesson. */
export function sectionsOf(document: LessonDocument): Section[] {
  const sections: Section[] = [{ id: '', heading: '', level: 1, body: '', clips: [] }]
  let clips = 0
  const visit = (node: LessonNode): void => {
    if (node.type === 'heading') {
      sections.push({ id: String(node.attrs?.id ?? ''), heading: textOf(node), level: Number(node.attrs?.level ?? 2), body: '', clips: [] })
      return
    }
    const section = sections.at(-1) as Section
    if (node.type === 'clip') {
      clips += 1
      section.clips.push({ anchor: `clip-${clips}`, asset: String(node.attrs?.asset), start: Number(node.attrs?.start ?? 0), end: typeof node.attrs?.end === 'number' ? node.attrs.end : null })
    }
    // A heading inside a block begins a section as one outside does.
    if (node.content && holdsMore(node)) node.content.forEach(visit)
    else section.body = `${section.body} ${textOf(node)}`.trim()
  }
  document.content?.forEach(visit)
  return sections.filter((section, index) => index > 0 || section.body !== '' || section.clips.length > 0)
}

/** Whether a heading or clip may stand somewhere in it. */
function holdsMore(node: LessonNode): boolean {
  return node.content?.some(child => child.type === 'heading' || child.type === 'clip' || holdsMore(child)) ?? false
}
