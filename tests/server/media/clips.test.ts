import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { seedClips } from '../../../scripts/seed/seed-clips'
import { openHarness, type Harness } from '../harness'

let harness: Harness
const em = () => harness.app.orm.em.fork()

beforeAll(async () => {
  harness = await openHarness()
  await seedClips(em(), harness.app.storage, new Date('2025-09-01T00:00:00Z'))
})
afterAll(async () => {
  await harness?.close()
})

const file = (name: string) => readFileSync(new URL(`../../../content/media/${name}.mp4`, import.meta.url))

/** Length a film's own header gives (ISO/IEC 14496-12, 8.2.2, from memory: version, times, timescale, duration). */
function secondsOf(film: Buffer): number {
  const at = film.indexOf('mvhd') + 4
  expect(film.readUInt8(at)).toBe(0)
  return film.readUInt32BE(at + 16) / film.readUInt32BE(at + 12)
}

it('puts both films of the starter curriculum into storage, once, small enough to be kept with the program', async () => {
  await seedClips(em(), harness.app.storage, new Date())
  const clips = await em().find(MediaAsset, { name: { $ne: null } }, { orderBy: { name: 'asc' } })
  expect(clips.map(clip => clip.name)).toEqual(['ball-touch', 'dummy-valves'])
  for (const clip of clips) {
    const film = file(clip.name ?? '')
    expect(clip).toMatchObject({ kind: 'video', state: 'ready', contentType: 'video/mp4', bytes: film.length })
    expect(film.length).toBeLessThan(400_000)
    expect(Buffer.from(await harness.app.storage.read(clip.key)).equals(film)).toBe(true)
    expect(await harness.app.imaging.detectType(film.subarray(0, 4096))).toBe('video/mp4')
    // A player that has the first bytes can begin: the index stands before the pictures.
    expect(film.indexOf('moov')).toBeLessThan(film.indexOf('mdat'))
  }
})

it('says of each how long it is, and has words and chapters from its beginning to its end', async () => {
  for (const clip of await em().find(MediaAsset, { name: { $ne: null } })) {
    const seconds = secondsOf(file(clip.name ?? ''))
    expect(clip.durationSeconds).toBeCloseTo(seconds, 1)
    const tracks = await em().find(MediaTrack, { asset: clip.id })
    const chapters = tracks.find(track => track.kind === 'chapters')?.cues ?? []
    expect(chapters[0]?.fromMs).toBe(0)
    expect(chapters.at(-1)?.toMs).toBe(Math.round(seconds * 1000))
    const captions = tracks.find(track => track.kind === 'captions')?.cues ?? []
    expect(captions.at(-1)?.toMs).toBeGreaterThan(seconds * 1000 - 1000)
  }
})

it('has the words a lesson is found by, with the second they are shown', async () => {
  const captions = await em().findOneOrFail(MediaTrack, { asset: { name: 'dummy-valves' }, kind: 'captions' })
  const found = captions.cues.filter(cue => cue.text.includes('lip at twelve o\'clock'))
  // From the caption file, read by eye: 17.1 s.
  expect(found.map(cue => cue.fromMs)).toEqual([17_100])
})
