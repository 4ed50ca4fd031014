import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { cohortsTaught, visibleHeads } from '#server/services/heads/visible-heads'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { maySeePhoto } from './photo-rights'

export type FoundPhoto = Loaded<Photo, 'upload' | 'submission.head'>

/** A photo this person may look at. @throws {Refusal} not_found */
export async function findPhoto(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, id: string): Promise<{ photo: FoundPhoto, mine: boolean }> {
  const photo = await em.findOne(Photo, { id, submission: { head: await visibleHeads(em, app, actor) } }, { populate: ['upload', 'submission.head'] })
  if (!photo) throw new Refusal('not_found')
  const head = photo.submission.$.head.$
  const taught = (await cohortsTaught(em, app, actor)).includes(head.cohort?.id ?? '')
  if (!maySeePhoto(actor, { view: photo.view, studentId: head.student.id, taught })) throw new Refusal('not_found')
  return { photo, mine: head.student.id === actor.id || taught }
}
