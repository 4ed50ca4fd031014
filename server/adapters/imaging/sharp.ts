import exifr from 'exifr'
import sharp, { type Metadata } from 'sharp'
import { AdapterRefusal } from '../adapter-refusal'
import { detectType } from './detect-type'
import { maxPicturePixels, previewPx, thumbnailPx, type Imaging, type PictureFacts, type Rendition } from './imaging'

const types: Partial<Record<string, PictureFacts['type']>> = { 'image/jpeg': 'image/jpeg', 'image/png': 'image/png', 'image/webp': 'image/webp' }

const unreadable = () => new AdapterRefusal('picture_unreadable', 'The picture cannot be read. Take it again.')

/** Pictures through libvips. */
export function sharpImaging(): Imaging {
  return { detectType, inspect, renditions }
}

async function inspect(file: Uint8Array): Promise<PictureFacts> {
  const detected = await detectType(file)
  const type = types[detected]
  if (!type) throw new AdapterRefusal('upload_wrong_type', `This is not a picture we can read (it looks like ${detected}). Send it as JPEG, PNG or WebP.`)
  let found: Metadata
  try {
    // Only the header; the limit below is ours to check, so that its sentence is too.
    found = await sharp(file, { limitInputPixels: false }).metadata()
  }
  catch {
    throw unreadable()
  }
  if (found.width * found.height > maxPicturePixels) {
    throw new AdapterRefusal('picture_too_large', `The picture is ${found.width} by ${found.height} pixels, more than 60 megapixels. Take it with the ordinary camera.`)
  }
  if ((found.pages ?? 1) > 1) throw new AdapterRefusal('picture_unreadable', 'This is a moving picture. Send a single photo.')
  const orientation = found.orientation ?? 1
  const lying = orientation >= 5
  return {
    type,
    widthPx: lying ? found.height : found.width,
    heightPx: lying ? found.width : found.height,
    orientation,
    takenAt: await takenAt(file),
  }
}

/** The camera's own words, not turned into an instant: cameras rarely say in which zone they are. */
async function takenAt(file: Uint8Array): Promise<string | null> {
  const tags = await exifr.parse(file, { pick: ['DateTimeOriginal'], reviveValues: false }).catch(() => undefined) as { DateTimeOriginal?: unknown } | undefined
  const [, year, month, day, time] = /^(\d{4}):(\d\d):(\d\d) (\d\d:\d\d:\d\d)/.exec(String(tags?.DateTimeOriginal ?? '')) ?? []
  return year && year !== '0000' ? `${year}-${month}-${day}T${time}` : null
}

async function renditions(file: Uint8Array): Promise<{ thumbnail: Rendition, preview: Rendition }> {
  await inspect(file)
  return { thumbnail: await rendition(file, thumbnailPx, 74), preview: await rendition(file, previewPx, 82) }
}

/** sharp leaves all metadata behind unless told otherwise. */
async function rendition(file: Uint8Array, longest: number, quality: number): Promise<Rendition> {
  try {
    const { data, info } = await sharp(file, { limitInputPixels: maxPicturePixels, failOn: 'error' })
      .rotate()
      .resize({ width: longest, height: longest, fit: 'inside', withoutEnlargement: true })
      .webp({ quality })
      .toBuffer({ resolveWithObject: true })
    return { body: data, contentType: 'image/webp', widthPx: info.width, heightPx: info.height }
  }
  catch {
    throw unreadable()
  }
}
