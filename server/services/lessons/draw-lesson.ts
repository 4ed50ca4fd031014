import type { EntityManager } from '@mikro-orm/postgresql'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { viewMedia } from '#server/services/media/view-media'
import type { Actor } from '#server/utils/actor'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { LessonView } from '#shared/contract/lessons'
import { sectionsOf } from '#shared/lesson/sections-of'
import { usesOf } from '#shared/lesson/uses-of'
import { lessonHtml } from './lesson-html'
import { limitSource, limitViews } from './limit-views'

/** A document as one reader sees it: HTML, contents list, the limits of their casting, the films with where they stopped. */
export async function drawLesson(em: EntityManager, actor: Actor, document: LessonDocument): Promise<Pick<LessonView, 'html' | 'headings' | 'limits' | 'clips'>> {
  const uses = usesOf(document)
  const limits = uses.criteria.length === 0 ? {} : limitViews(await limitSource(em, actor), uses.criteria)
  const ids = [...uses.pictures, ...uses.clips]
  const assets = ids.length === 0 ? [] : await em.find(MediaAsset, { id: { $in: ids } })
  const media = Object.fromEntries((await viewMedia(em, actor.id, assets)).map(one => [one.id, one]))
  return {
    html: lessonHtml(document, { limits, media }),
    headings: sectionsOf(document).filter(section => section.id !== '').map(({ id, heading, level }) => ({ id, text: heading, level })),
    limits,
    clips: Object.fromEntries(Object.entries(media).filter(([id, one]) => one.kind === 'video' && uses.clips.includes(id))),
  }
}
