import type { Loaded } from '@mikro-orm/postgresql'
import type { Photo } from '#server/db/entities/Photo'
import type { PhotoView } from '#shared/contract/views'
import { viewNames } from '#shared/domain/rubric/words'

const states = new Map<string, PhotoView['state']>([['being-measured', 'being measured'], ['cannot-use', 'cannot use']])

/** A photo as pages show it. Its pictures are fetched through our own address, which signs anew each time: a page may stand open for hours. */
export function viewPhoto(photo: Loaded<Photo, 'addedBy'>): PhotoView {
  const address = (size: 'thumb' | 'preview', key: string | null | undefined) => (key ? `/api/photos/${photo.id}/image?size=${size}` : null)
  return {
    id: photo.id,
    view: photo.view,
    viewName: viewNames[photo.view] ?? photo.view,
    cylinder: photo.cylinder ?? null,
    side: photo.side ?? null,
    spot: photo.spot ?? null,
    state: states.get(photo.state) ?? photo.state as PhotoView['state'],
    problem: photo.problem ?? null,
    thumbUrl: address('thumb', photo.thumbKey),
    previewUrl: address('preview', photo.previewKey),
    width: photo.width ?? null,
    height: photo.height ?? null,
    takenAt: photo.takenAt.toISOString(),
    addedBy: photo.addedBy.$.name,
  }
}
