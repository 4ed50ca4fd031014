import { defineStore } from 'pinia'
import { ref } from 'vue'
import { openDevice } from './outbox/device-database'

/** What stands on the reading pad and was not yet sent. */
export interface ReadingDraft { quantity: string, cylinder: number | null, side: 'intake' | 'exhaust' | null, spot: string | null, where: string, when: 'before' | 'after' | null, values: string[], typing: string, unit: string, instrument: string }

/** Free of the proxies the screen puts round it: the browser's database takes plain data only. */
const plain = (draft: ReadingDraft): ReadingDraft => ({ ...draft, values: [...draft.values] })

/** Figures on the pad, one draft for each person and submission, kept in the browser's database as they are typed. */
export const useReadingDrafts = defineStore('reading-drafts', () => {
  const drafts = ref<Record<string, ReadingDraft>>({})
  const keyOf = (person: string, submissionId: string) => `${person}:${submissionId}`

  async function open(person: string, submissionId: string): Promise<ReadingDraft | null> {
    const key = keyOf(person, submissionId)
    const kept = await (await openDevice()).get('drafts', key)
    if (kept) drafts.value[key] = kept.value as ReadingDraft
    return drafts.value[key] ?? null
  }

  async function keep(person: string, submissionId: string, draft: ReadingDraft) {
    const key = keyOf(person, submissionId)
    drafts.value[key] = draft
    await (await openDevice()).put('drafts', { key, person, value: plain(draft), keptAt: Date.now() })
  }

  async function discard(person: string, submissionId: string) {
    const key = keyOf(person, submissionId)
    const { [key]: _gone, ...rest } = drafts.value
    drafts.value = rest
    await (await openDevice()).delete('drafts', key)
  }

  return { drafts, open, keep, discard }
})
