export interface PictureFacts {
  type: 'image/jpeg' | 'image/png' | 'image/webp'
  /** As seen, after the camera's turn is applied. */
  widthPx: number
  heightPx: number
  /** EXIF orientation as found, 1 to 8; 1 when there is none. */
  orientation: number
  /** As the camera wrote it, `2026-03-25T14:03:11`, in the camera's own time; null when it wrote none. */
  takenAt: string | null
}

export interface Rendition {
  body: Uint8Array
  contentType: 'image/webp'
  widthPx: number
  heightPx: number
}

export interface Imaging {
  /** What the bytes are, from themselves and never from a name: a media type, `application/octet-stream` when nothing is known. The first 4 kB are enough. */
  detectType: (firstBytes: Uint8Array) => Promise<string>
  /**
   * Reads the header alone; nothing is decoded.
   * @throws {AdapterRefusal} upload_wrong_type, picture_unreadable, picture_too_large
   */
  inspect: (file: Uint8Array) => Promise<PictureFacts>
  /**
   * The small picture for lists and the one for the viewer: turned upright, with no word left of where, when or with what it was taken.
   * @throws {AdapterRefusal} as `inspect`, and picture_unreadable when the picture itself is broken
   */
  renditions: (file: Uint8Array) => Promise<{ thumbnail: Rendition, preview: Rendition }>
}

export const maxPicturePixels = 60_000_000
/** Longest side. */
export const thumbnailPx = 400
export const previewPx = 1600
