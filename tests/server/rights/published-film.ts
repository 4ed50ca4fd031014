import { randomUUID } from 'node:crypto'
import { ref } from '@mikro-orm/core'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { User } from '#server/db/entities/User'
import type { World } from './world'

/** A film with captions that a published lesson shows; Imre and Bettany have a bench, and Freya's access after hers runs. */
export async function publishedFilm({ harness, school, bettany, freya }: World): Promise<string> {
  const id = randomUUID()
  const key = `lesson-media/${id}`
  await harness.app.storage.put({ key, body: Buffer.from('a film'), contentType: 'video/mp4' })
  await school.em().transactional(async (tx) => {
    for (const person of [school.imre, bettany]) {
      if (await tx.count(BenchPlace, { person: person.id, state: 'here' }) === 0) tx.create(BenchPlace, { cohort: tx.getReference(Cohort, school.cohortId), person: tx.getReference(User, person.id), state: 'here', slot: person === bettany ? 8 : 9, createdAt: school.now() })
    }
    await tx.nativeUpdate(BenchPlace, { person: freya.id, state: 'finished' }, { accessUntil: new Date(school.now().getTime() + 3600_000) })
    const asset = tx.create(MediaAsset, { id, kind: 'video', title: 'Scribing', name: null, upload: null, key, contentType: 'video/mp4', bytes: 6, width: null, height: null, durationSeconds: 2, state: 'ready', problem: null, addedBy: null, addedAt: school.now() })
    tx.create(MediaTrack, { asset, kind: 'captions', language: 'en', vtt: 'WEBVTT\n\n00:00.000 --> 00:01.000\nUpright\n', cues: [{ fromMs: 0, toMs: 1000, text: 'Upright' }], savedBy: null, savedAt: school.now() })
    const cohort = await tx.findOneOrFail(Cohort, school.cohortId, { populate: ['course'] })
    const course = cohort.course?.$ ?? tx.create(Course, { code: 'films', title: 'Films', summary: '', createdAt: school.now() })
    cohort.course = ref(course)
    const module = await tx.findOne(CourseModule, { course, number: 1 }) ?? tx.create(CourseModule, { course, number: 1, title: 'Lines', outcome: '', gates: [] })
    const number = 1000 + await tx.count(Lesson)
    const lesson = tx.create(Lesson, { number, slug: `film-${number}`, title: 'Scribing', module, ops: [40], createdAt: school.now() })
    tx.create(LessonVersion, { lesson, version: 1, title: 'Scribing', minutes: 1, document: { type: 'doc', content: [{ type: 'clip', attrs: { asset: id, start: 0, end: null, caption: '' } }] }, whatChanged: 'First', why: 'First', publishedBy: null, publishedAt: school.now() })
  })
  return id
}
