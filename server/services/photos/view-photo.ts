import type { Loaded } from '@mikro-orm/postgresql'
import type { Photo } from '#server/db/entities/Photo'
import type { App } from '#server/utils/app'
import type { PhotoView } from '#shared/contract/views'
import { viewNames } from '#shared/domain/rubric/words'

const states = new Map<string, PhotoView['state']>([['being-measured', 'being measured'], ['cannot-use', 'cannot use']])

/** A photo as pages show it: signed addresses of the pictures we made ourselves, never of the original. */
export async function viewPhoto(app: Pick<App, 'storage'>, photo: Loaded<Photo, 'addedBy'>): Promise<PhotoView> {
  const sign = (key: string | null | undefined) => (key ? app.storage.signGet({ key, contentType: 'image/webp', filename: `${photo.view}.webp`, disposition: 'inline' }) : null)
  return {
    id: photo.id,
    view: photo.view,
    viewName: viewNames[photo.view] ?? photo.view,
    cylinder: photo.cylinder ?? null,
    side: photo.side ?? null,
    spot: photo.spot ?? null,
    state: states.get(photo.state) ?? photo.state as PhotoView['state'],
    problem: photo.problem ?? null,
    thumbUrl: await sign(photo.thumbKey),
    previewUrl: await sign(photo.previewKey),
    width: photo.width ?? null,
    height: photo.height ?? null,
    takenAt: photo.takenAt.toISOString(),
    addedBy: photo.addedBy.$.name,
  }
}
