import { readFileSync } from 'node:fs'
import type { EntityManager } from '@mikro-orm/postgresql'
import { z } from 'zod'
import type { Storage } from '#server/adapters/storage/storage'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { readTrack } from '#server/services/media/read-track'

const folder = new URL('../../content/media/', import.meta.url)
const clipsShape = z.array(z.object({ name: z.string(), title: z.string(), width: z.number().int(), height: z.number().int(), durationSeconds: z.number() }).strict())

/**
 * Puts the films of content/media into storage and among the school's media, with their captions and chapters. Those that are there
 * already stay as they are.
 *
 * @throws {Error} naming file and line when captions or chapters have a mistake
 */
export async function seedClips(em: EntityManager, storage: Storage, at: Date): Promise<void> {
  for (const { name, ...about } of clipsShape.parse(JSON.parse(readFileSync(new URL('clips.json', folder), 'utf8')))) {
    if (await em.count(MediaAsset, { name }) > 0) continue
    const body = readFileSync(new URL(`${name}.mp4`, folder))
    const key = `lesson-media/starter/${name}.mp4`
    await storage.put({ key, body, contentType: 'video/mp4' })
    const asset = em.create(MediaAsset, { ...about, kind: 'video', name, upload: null, key, contentType: 'video/mp4', bytes: body.length, state: 'ready', problem: null, addedBy: null, addedAt: at })
    em.persist(asset)
    for (const kind of ['captions', 'chapters'] as const) {
      const file = `${name}.${kind}.vtt`
      const vtt = readFileSync(new URL(file, folder), 'utf8')
      const { cues, issues } = readTrack({ kind, vtt }, about.durationSeconds)
      if (issues.length > 0) throw new Error(`content/media/${file}: ${issues.map(issue => `${issue.path}: ${issue.message}`).join(' ')}`)
      em.persist(em.create(MediaTrack, { asset, kind, language: 'en', vtt, cues, savedBy: null, savedAt: at }))
    }
  }
  await em.flush()
}
