import { defineStore } from 'pinia'
import type { LessonDocument } from '#shared/contract/lesson-document'
import { openDevice } from './outbox/device-database'

/** A lesson as it stands in an editor and not yet with the server; `seen` is the server's revision it was written over. */
export interface KeptLesson { seen: number, title: string, document: LessonDocument, keptAt: number }

/**
 * What is written and not yet with the server, and what was set aside when somebody else's text was taken instead: for each person and lesson,
 * in the browser's own database, so that a reload or an ended session loses nothing.
 */
export const useLessonDrafts = defineStore('lesson-drafts', () => {
  const keyOf = (person: string, slug: string, shelf: 'lesson' | 'aside') => `${person}:${shelf}:${slug}`

  async function open(person: string, slug: string, shelf: 'lesson' | 'aside' = 'lesson'): Promise<KeptLesson | null> {
    const kept = await (await openDevice()).get('drafts', keyOf(person, slug, shelf))
    return kept ? kept.value as KeptLesson : null
  }

  async function keep(person: string, slug: string, draft: Omit<KeptLesson, 'keptAt'>, shelf: 'lesson' | 'aside' = 'lesson'): Promise<void> {
    // Free of the proxies the screen puts round it: the browser's database takes plain data only.
    const value: KeptLesson = { ...JSON.parse(JSON.stringify(draft)) as typeof draft, keptAt: Date.now() }
    await (await openDevice()).put('drafts', { key: keyOf(person, slug, shelf), person, value, keptAt: value.keptAt })
  }

  async function discard(person: string, slug: string, shelf: 'lesson' | 'aside' = 'lesson'): Promise<void> {
    await (await openDevice()).delete('drafts', keyOf(person, slug, shelf))
  }

  return { open, keep, discard }
})
