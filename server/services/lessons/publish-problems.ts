import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'
import type { PublishProblem } from '#shared/contract/lessons'
import { textOf } from '#shared/lesson/text-of'
import { usesOf } from '#shared/lesson/uses-of'

/** What a lesson may show: films and pictures that are there, criteria of the newest rubric, lessons it links to. */
interface Known { pictures: ReadonlySet<string>, clips: ReadonlySet<string>, criteria: ReadonlySet<string>, lessons: ReadonlySet<string> }

/**
 * Why a checked document may not be published yet, in its own order; empty when it may. A draft may have all of it: somebody is still
 * writing.
 */
export async function publishProblems(em: EntityManager, document: LessonDocument): Promise<PublishProblem[]> {
  const uses = usesOf(document)
  const assets = await em.find(MediaAsset, { id: { $in: [...uses.pictures, ...uses.clips] }, state: 'ready' })
  const ids = (kind: MediaAsset['kind']) => new Set(assets.filter(asset => asset.kind === kind).map(asset => asset.id))
  const [newest] = uses.criteria.length === 0 ? [] : await em.find(RubricVersion, {}, { orderBy: { version: 'desc' }, limit: 1 })
  const lessons = await em.find(Lesson, { slug: { $in: uses.lessons } })
  const known: Known = {
    pictures: ids('image'),
    clips: ids('video'),
    criteria: new Set(newest?.rubric.stages.flatMap(stage => stage.criteria.map(one => one.id))),
    lessons: new Set(lessons.map(lesson => lesson.slug)),
  }
  if (!textOf(document)) return [{ path: 'document', code: 'lesson_empty', message: 'There is nothing in this lesson yet.' }]
  return (document.content ?? []).flatMap((node, index) => problemsOf(node, `document.content.${index}`, known))
}

function problemsOf(node: LessonNode, path: string, known: Known): PublishProblem[] {
  const { attrs = {} } = node
  const problem = (code: PublishProblem['code'], name: string, message: string): PublishProblem => ({ path: `${path}.attrs.${name}`, code, message })
  const own: PublishProblem[] = []
  const blank = (value: unknown) => String(value ?? '').trim() === ''
  if (node.type === 'figure') {
    if (attrs.asset === null && attrs.drawing === null) own.push(problem('picture_missing', 'asset', 'Choose the picture, or take the figure out.'))
    else if (typeof attrs.asset === 'string' && !known.pictures.has(attrs.asset)) own.push(problem('picture_missing', 'asset', 'This picture is not in the media list.'))
    if (blank(attrs.alt)) own.push(problem('alt_missing', 'alt', 'Say in words what the picture shows, for whoever cannot see it.'))
  }
  if (node.type === 'clip') {
    if (!known.clips.has(String(attrs.asset))) own.push(problem('clip_not_ready', 'asset', 'This film is not there, or not checked yet.'))
    if (blank(attrs.caption)) own.push(problem('clip_caption_missing', 'caption', 'Say what the film shows; it is what is printed.'))
  }
  if (node.type === 'limit' && !known.criteria.has(String(attrs.criterion))) own.push(problem('criterion_unknown', 'criterion', `The newest rubric has no ${String(attrs.criterion)}.`))
  for (const mark of node.marks ?? []) {
    const slug = mark.type === 'link' ? /^\/lessons\/([a-z0-9-]+)/.exec(String(mark.attrs?.href))?.[1] : undefined
    if (slug !== undefined && !known.lessons.has(slug)) own.push({ path, code: 'link_unknown', message: `There is no lesson at /lessons/${slug}.` })
  }
  return [...own, ...(node.content ?? []).flatMap((child, index) => problemsOf(child, `${path}.content.${index}`, known))]
}
