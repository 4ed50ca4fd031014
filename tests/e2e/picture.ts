import { randomUUID } from 'node:crypto'
import { readFileSync } from 'node:fs'
import sharp from 'sharp'

/**
 * A photo nobody has used: one of the school's rendered chambers, its brightness a little different each time, for the product refuses a
 * picture it has seen. `width` makes it as heavy as a test needs.
 */
export async function takePicture(width = 900): Promise<{ name: string, mimeType: string, buffer: Buffer }> {
  const id = randomUUID()
  const base = readFileSync(new URL('../../content/photos/chamber-05.jpg', import.meta.url))
  const buffer = await sharp(base).resize({ width }).withExif({ IFD0: { ImageDescription: `rendered, ${id}` } }).jpeg({ quality: 80 }).toBuffer()
  return { name: `picture-${id.slice(0, 8)}.jpg`, mimeType: 'image/jpeg', buffer }
}

/** A sheet of tests/fixtures/sheets as a file to choose. */
export function sheetFile(name: string, change: (text: string) => string = text => text): { name: string, mimeType: string, buffer: Buffer } {
  const bytes = readFileSync(new URL(`../fixtures/sheets/${name}`, import.meta.url))
  return { name, mimeType: 'text/csv', buffer: Buffer.from(change(bytes.toString('utf8')), 'utf8') }
}
