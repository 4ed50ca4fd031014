import { crc32, deflateSync } from 'node:zlib'
import sharp from 'sharp'
import { expect, it } from 'vitest'
import { sharpImaging } from '../../../server/adapters/imaging/sharp'

const imaging = sharpImaging()
const grey = (width: number, height: number) => sharp({ create: { width, height, channels: 3, background: '#888' } })

/** A PNG that says what size it is and holds next to nothing: the header is all a careful reader looks at. */
function hugePng(width: number, height: number): Buffer {
  const chunk = (type: string, data: Buffer) => {
    const body = Buffer.concat([Buffer.from(type), data])
    const length = Buffer.alloc(4)
    length.writeUInt32BE(data.length)
    const sum = Buffer.alloc(4)
    sum.writeUInt32BE(crc32(body))
    return Buffer.concat([length, body, sum])
  }
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header.set([1, 0, 0, 0, 0], 8)
  return Buffer.concat([Buffer.from([137, 80, 78, 71, 13, 10, 26, 10]), chunk('IHDR', header), chunk('IDAT', deflateSync(Buffer.alloc(1000))), chunk('IEND', Buffer.alloc(0))])
}

it('tells size, turn and time from the header, as the picture is seen', async () => {
  const body = await grey(300, 200).withExif({ IFD2: { DateTimeOriginal: '2026:03:25 14:03:11' } }).withMetadata({ orientation: 6 }).jpeg().toBuffer()
  // Orientation 6 (TIFF 6.0, tag 274): turned a quarter clockwise, so width and height change places.
  expect(await imaging.inspect(body)).toMatchObject({ type: 'image/jpeg', widthPx: 200, heightPx: 300, orientation: 6 })
  const timed = await grey(30, 20).withExif({ IFD2: { DateTimeOriginal: '2026:03:25 14:03:11' } }).jpeg().toBuffer()
  expect((await imaging.inspect(timed)).takenAt).toBe('2026-03-25T14:03:11')
  expect((await imaging.inspect(await grey(30, 20).png().toBuffer())).takenAt).toBeNull()
})
it('makes the two pictures upright and leaves place, time and camera behind', async () => {
  // Left half white, right half black; turned by 6 the white half is on top.
  const white = await sharp({ create: { width: 1000, height: 1500, channels: 3, background: '#fff' } }).png().toBuffer()
  const body = await sharp({ create: { width: 2000, height: 1500, channels: 3, background: '#000' } })
    .composite([{ input: white, left: 0, top: 0 }])
    .withExif({ IFD0: { Make: 'A camera' }, IFD3: { GPSLatitude: '51/1 30/1 0/1', GPSLatitudeRef: 'N' } }).withMetadata({ orientation: 6 }).jpeg().toBuffer()
  const { thumbnail, preview } = await imaging.renditions(body)
  expect([thumbnail.widthPx, thumbnail.heightPx]).toEqual([300, 400])
  expect([preview.widthPx, preview.heightPx]).toEqual([1200, 1600])
  const found = await sharp(preview.body).metadata()
  expect([found.format, found.exif, found.xmp, found.icc]).toEqual(['webp', undefined, undefined, undefined])
  const pixel = async (top: number) => (await sharp(thumbnail.body).extract({ left: 150, top, width: 1, height: 1 }).raw().toBuffer())[0] ?? -1
  expect(await pixel(20)).toBeGreaterThan(await pixel(380) + 100)
})
it('does not blow a small picture up', async () => {
  const { preview } = await imaging.renditions(await grey(120, 80).png().toBuffer())
  expect([preview.widthPx, preview.heightPx]).toEqual([120, 80])
})
it('refuses 30,000 by 30,000 pixels from the header, in no time', async () => {
  const started = performance.now()
  await expect(imaging.inspect(hugePng(30_000, 30_000))).rejects.toMatchObject({ code: 'picture_too_large', sentence: expect.stringContaining('30000 by 30000') })
  await expect(imaging.renditions(hugePng(30_000, 30_000))).rejects.toMatchObject({ code: 'picture_too_large' })
  expect(performance.now() - started).toBeLessThan(1000)
})
it.each([
  ['a PDF', Buffer.from('%PDF-1.7\n%âãÏÓ\n1 0 obj\n<<>>\nendobj\n')],
  ['a drawing that can run script', Buffer.from('<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg"><script>1</script></svg>')],
  ['a page', Buffer.from('<!doctype html><html><script>1</script></html>')],
  ['a text', Buffer.from('lift,cfm\n1,20\n')],
  ['nothing', Buffer.alloc(0)],
  ['noise', Buffer.from([0, 1, 2, 3, 200, 4, 5, 6])],
])('refuses %s, whatever its name says', async (_what, body) => {
  await expect(imaging.inspect(body)).rejects.toMatchObject({ code: 'upload_wrong_type' })
})
it('refuses a picture that ends half-way, and one that moves', async () => {
  const noise = Buffer.from(Array.from({ length: 300 * 300 * 3 }, (_, n) => (n * 7919) % 251))
  const whole = await sharp(noise, { raw: { width: 300, height: 300, channels: 3 } }).jpeg().toBuffer()
  await expect(imaging.renditions(whole.subarray(0, whole.length / 2))).rejects.toMatchObject({ code: 'picture_unreadable' })
  await expect(imaging.inspect(whole.subarray(0, 40))).rejects.toMatchObject({ code: 'picture_unreadable' })
  const frames = await sharp(Buffer.concat([Buffer.alloc(300, 20), Buffer.alloc(300, 200)]), { raw: { width: 10, height: 20, channels: 3, pageHeight: 10 } }).webp({ loop: 0, delay: [100, 100] }).toBuffer()
  await expect(imaging.inspect(frames)).rejects.toMatchObject({ code: 'picture_unreadable', sentence: expect.stringContaining('moving') })
})
it('names a file by its bytes', async () => {
  expect(await imaging.detectType(await grey(10, 10).png().toBuffer())).toBe('image/png')
  expect(await imaging.detectType(Buffer.from('%PDF-1.7\n'))).toBe('application/pdf')
  expect(await imaging.detectType(Buffer.from('Hub;cfm\r\n1,27;22,4\r\n'))).toBe('text/plain')
  expect(await imaging.detectType(Buffer.from('\ufefflift (mm),flow\n'))).toBe('text/plain')
  expect(await imaging.detectType(Buffer.from('\ufefflift', 'utf16le'))).toBe('text/plain')
  // An MPEG frame header (ISO/IEC 11172-3, 2.4.1) begins with the same two bytes.
  expect(await imaging.detectType(Buffer.from([0xff, 0xfe, 0x90, 0x01, 0x00, 0x03, 0x00, 0x00, 0x00, 0x00]))).not.toBe('text/plain')
  expect(await imaging.detectType(Buffer.from('  <svg onload=alert(1)>'))).toBe('image/svg+xml')
  expect(await imaging.detectType(Buffer.from('hello <img src=x onerror=alert(1)>'))).toBe('text/html')
})
