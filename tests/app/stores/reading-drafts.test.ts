import 'fake-indexeddb/auto'
import { createPinia, setActivePinia } from 'pinia'
import { reactive } from 'vue'
import { expect, it } from 'vitest'
import { useReadingDrafts, type ReadingDraft } from '~/stores/reading-drafts'

const submission = '11111111-1111-4111-8111-111111111111'
const draft = (typing: string): ReadingDraft => ({ quantity: 'seat-land', cylinder: 1, side: 'intake', spot: '12', where: '', when: null, values: ['1.64'], typing, unit: 'mm', instrument: 'loupe' })

/** The page as it is after a reload. */
function reloaded() {
  setActivePinia(createPinia())
  return useReadingDrafts()
}

it('keeps what stands on the pad for each person alone, on a tablet they share', async () => {
  // As the screen hands it over: behind proxies, which the browser's database would not take.
  await reloaded().keep('imre', submission, reactive(draft('1.6')))
  const other = reloaded()
  expect(await other.open('bettany', submission)).toBeNull()
  await other.keep('bettany', submission, draft('1.7'))
  expect(await reloaded().open('imre', submission)).toEqual(draft('1.6'))

  await reloaded().discard('imre', submission)
  expect(await reloaded().open('imre', submission)).toBeNull()
  expect(await reloaded().open('bettany', submission)).toEqual(draft('1.7'))
})
