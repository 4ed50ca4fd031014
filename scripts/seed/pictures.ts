import { readFileSync } from 'node:fs'
import sharp from 'sharp'
import type { Rendition } from '#server/adapters/imaging/imaging'
import type { App } from '#server/utils/app'
import type { Side } from '#shared/domain/units/port'
import { drawnPicture } from './drawn-picture'
import { steadyNoise } from './steady-noise'

interface Given { cylinder: number, seats: { side: Side, centre: [number, number], rim: [number, number] }[] }
interface Base { jpeg: Buffer, preview: Rendition, kind: 'rendered' | 'drawn', shownKeys: StoryPicture['shownKeys'] }

export interface StoryPicture {
  jpeg: Buffer
  preview: Rendition
  /** Where the small picture and the one for the viewer are. */
  shownKeys: { thumbnail: string, preview: string }
  filename: string
}

/** The seven rendered pictures; the last shows dummy valves. */
const rendered = [1, 2, 3, 4, 5, 6, 7]
const withDummies = 7
/** Views that look at a chamber or a seat, which the rendered pictures show. */
const ofChamber = new Set(['view-1', 'view-2', 'view-3'])
const ofSeat = new Set(['view-4', 'view-5', 'view-12'])

const folder = new URL('../../content/photos/', import.meta.url)

/**
 * Pictures for the story's photos: the rendered ones whole, their seats close up, and plain drawings for the other views.
 *
 * Each is made once and small; every photo then gets bytes of its own by a comment in the file that says whose it is, because the
 * product refuses the same picture twice in a cohort.
 */
export function storyPictures({ imaging, storage }: Pick<App, 'imaging' | 'storage'>) {
  const bases = new Map<string, Promise<Base>>()
  const base = (key: string, make: () => Promise<Buffer>, kind: Base['kind']): Promise<Base> => {
    const there = bases.get(key)
    if (there) return there
    const made = make().then(async (jpeg): Promise<Base> => {
      const { thumbnail, preview } = await imaging.renditions(jpeg)
      const shownKeys = { thumbnail: `shown/${key}.thumb.webp`, preview: `shown/${key}.preview.webp` }
      await storage.put({ key: shownKeys.thumbnail, body: thumbnail.body, contentType: thumbnail.contentType })
      await storage.put({ key: shownKeys.preview, body: preview.body, contentType: preview.contentType })
      return { jpeg, preview, kind, shownKeys }
    })
    bases.set(key, made)
    return made
  }

  function baseFor(view: string, head: string, cylinder: number | null, side: Side | null, dummies: boolean): Promise<Base> {
    const others = rendered.filter(one => one !== withDummies)
    const which = dummies ? withDummies : others[Math.floor((steadyNoise(head, cylinder, view) + 1) / 2 * others.length) % others.length] ?? 1
    if (ofChamber.has(view)) return base(`whole-${which}`, () => whole(which), 'rendered')
    if (ofSeat.has(view)) {
      const port = side ?? (view === 'view-5' ? 'exhaust' : 'intake')
      return base(`seat-${which}-${port}`, () => seat(which, port), 'rendered')
    }
    // Only the stamp is told apart by its head.
    const number = view === 'view-15' ? head : ''
    return base(`${view}-${number}`, () => sharp(Buffer.from(drawnPicture(view, number))).jpeg({ quality: 70 }).toBuffer(), 'drawn')
  }

  return {
    /** @param count tells pictures of one view and spot apart */
    async take(photo: { view: string, head: string, op: number, cylinder: number | null, side: Side | null, dummies: boolean, count: string }): Promise<StoryPicture> {
      const { view, head, op, cylinder, side, dummies, count } = photo
      const found = await baseFor(view, head, cylinder, side, dummies)
      const words = [head, `op${op}`, view, cylinder === null ? '' : `c${cylinder}`, side ?? '', count].filter(part => part !== '').join('-')
      const { preview, shownKeys } = found
      return { preview, shownKeys, jpeg: withComment(found.jpeg, `${found.kind} for the demo school: ${words}`), filename: `${found.kind}-${words}.jpg` }
    },
  }
}

/** A JPEG comment segment right after the start marker (ITU-T T.81, B.2.4.5; from memory): other bytes, the same picture. */
function withComment(jpeg: Buffer, text: string): Buffer {
  const words = Buffer.from(text, 'utf8')
  const head = Buffer.alloc(4)
  head.writeUInt16BE(0xFFFE, 0)
  head.writeUInt16BE(words.length + 2, 2)
  return Buffer.concat([jpeg.subarray(0, 2), head, words, jpeg.subarray(2)])
}

const file = (which: number, ending: string) => readFileSync(new URL(`chamber-0${which}.${ending}`, folder))

function whole(which: number): Promise<Buffer> {
  return sharp(file(which, 'jpg')).rotate().resize({ width: 900 }).jpeg({ quality: 60 }).toBuffer()
}

/** The seat close up: a square round its centre, three of its radii wide. */
async function seat(which: number, side: Side): Promise<Buffer> {
  const given = JSON.parse(file(which, 'given.json').toString('utf8')) as Given
  const { centre, rim } = given.seats.find(one => one.side === side) ?? given.seats[0] ?? { centre: [2000, 1500], rim: [2200, 1500] }
  const { width, height } = await sharp(file(which, 'jpg')).metadata()
  const half = Math.round(1.6 * Math.hypot(centre[0] - rim[0], centre[1] - rim[1]))
  const left = Math.min(Math.max(0, centre[0] - half), width - 2 * half)
  const top = Math.min(Math.max(0, centre[1] - half), height - 2 * half)
  // Clicks are in the stored picture, so it is cut before it is turned upright.
  return sharp(file(which, 'jpg')).extract({ left, top, width: 2 * half, height: 2 * half }).resize({ width: 640, withoutEnlargement: true }).jpeg({ quality: 66 }).toBuffer()
}
