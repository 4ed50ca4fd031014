import type { UploadInput } from './inputs'

const mega = 1024 ** 2

/** Largest file of each purpose, bytes. */
export const largestUpload: Record<UploadInput['purpose'], number> = {
  'photo': 30 * mega,
  'flow-sheet': 2 * mega,
  'document': 20 * mega,
  'lesson-media': 2048 * mega,
}

/** Uploads a person may have open at once, and bytes a person may announce in a day. */
export const openUploads = 40
export const bytesADay = 2048 * mega

/** Types each purpose takes, as detected from the bytes and never from the name. */
export const typesOf: Record<UploadInput['purpose'], readonly string[]> = {
  'photo': ['image/jpeg', 'image/png', 'image/webp'],
  'flow-sheet': ['text/plain', 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet', 'application/zip'],
  'document': ['application/pdf', 'image/jpeg', 'image/png', 'image/webp', 'text/plain'],
  'lesson-media': ['image/jpeg', 'image/png', 'image/webp', 'video/mp4', 'video/webm'],
}
