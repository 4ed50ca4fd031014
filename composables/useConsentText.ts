import { computed, ref, watch } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { ConsentTextInput, ConsentTextView } from '#shared/contract/safety'
import { sameSafetyClauses } from '#shared/contract/safety'
import { useApi } from './useApi'
import { useRead } from './useRead'

type Draft = Pick<ConsentTextInput, 'clauses' | 'choices'>

/** The safety form's text as its next version is being written. */
export function useConsentText() {
  const api = useApi()
  // In the browser alone: what is typed into lives there.
  const { data: text, failure, refresh } = useRead<ConsentTextView>('/api/consent/text', { later: true })
  const draft = ref<Draft>({ clauses: [], choices: [] })
  const busy = ref(false)
  const refused = ref<Failure | null>(null)
  const said = ref('')
  const copy = (from: Draft): Draft => ({ clauses: from.clauses.map(one => ({ ...one })), choices: from.choices.map(one => ({ ...one })) })
  watch(text, now => now && (draft.value = copy(now)), { immediate: true })

  const changed = computed(() => JSON.stringify(draft.value) !== JSON.stringify(copy(text.value ?? { clauses: [], choices: [] })))
  const asksAgain = computed(() => Boolean(text.value) && !sameSafetyClauses(text.value?.clauses ?? [], draft.value.clauses))

  async function save() {
    if (busy.value) return
    busy.value = true
    said.value = ''
    const answer = await api.post<ConsentTextView>('/api/consent/text', { after: text.value?.version ?? 0, ...draft.value }, crypto.randomUUID())
    refused.value = answer.ok ? null : answer.failure
    if (answer.ok) {
      text.value = answer.value
      said.value = `Version ${answer.value.version} is saved.`
    }
    busy.value = false
  }
  /** Codes are made, not typed: they only tell points apart. */
  function addClause() {
    draft.value.clauses.push({ code: `point-${crypto.randomUUID().slice(0, 8)}`, title: '', text: '', safety: true })
  }
  function removeClause(at: number) {
    draft.value.clauses.splice(at, 1)
  }
  return { text, failure, refresh, draft, changed, asksAgain, busy, refused, said, save, addClause, removeClause }
}
