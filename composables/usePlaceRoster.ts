import { ref, shallowRef } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { RosterPreview } from '#shared/contract/places'
import { useApi } from './useApi'

/** A list of people for a cohort: shown first as it would be taken, then taken exactly as shown. */
export function usePlaceRoster(code: string) {
  const path = `/api/cohorts/${encodeURIComponent(code)}/roster`
  const api = useApi()
  const csv = ref('')
  const preview = shallowRef<RosterPreview | null>(null)
  const refused = ref<Failure | null>(null)
  const busy = ref(false)
  const taken = ref<number | null>(null)
  let key: string | null = null

  async function show() {
    busy.value = true
    taken.value = null
    key = null
    const answer = await api.post<RosterPreview>(`${path}/preview`, { csv: csv.value })
    preview.value = answer.ok ? answer.value : null
    refused.value = answer.ok ? null : answer.failure
    busy.value = false
  }
  async function take() {
    const shown = preview.value
    if (!shown || busy.value) return
    busy.value = true
    key ??= crypto.randomUUID()
    const answer = await api.post(path, { csv: csv.value, seen: shown.seen }, key)
    busy.value = false
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) {
      taken.value = shown.good
      preview.value = null
      csv.value = ''
    }
    // Somebody took a place in between: show what would happen now.
    else if (answer.failure.status === 409) {
      const why = answer.failure
      await show()
      refused.value ??= why
    }
    if (answer.ok || answer.failure.status > 0) key = null
  }
  return { csv, preview, refused, busy, taken, show, take }
}
