import { computed, ref, watch } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { CriterionView, ResultView, ReviewSheetView } from '#shared/contract/views'
import type { Side } from '#shared/domain/units/port'
import { useApi } from './useApi'
import { useFollow } from './useFollow'
import { useRead } from './useRead'

export interface OverrideDraft { criterion: string, cylinder: number | null, side: Side | null, at: string | null, state: 'accept' | 'borderline' | 'reject', reason: string }
export interface PinDraft { number: number, photoId: string, x: number, y: number, criterion: string, text: string }

const keyOf = (result: { criterion: string, cylinder: number | null, side: string | null, at: string | null }) => [result.criterion, result.cylinder, result.side, result.at].join('|')

/** A review as it is being made: overrides, reasons, pins, sentences and words, and the decision that sends them all at once. */
export function useReview(id: string) {
  const api = useApi()
  const { data: sheet, failure, loading, refresh } = useRead<ReviewSheetView>(`/api/submissions/${id}/review-sheet`)
  const overrides = ref<OverrideDraft[]>([])
  const reasons = ref<Record<string, string>>({})
  const pins = ref<PinDraft[]>([])
  const sentences = ref<Record<string, string>>({})
  const feedback = ref('')
  const condition = ref('')
  const sending = ref(false)
  const refusal = ref<Failure | null>(null)
  const done = ref(false)
  const key = ref(crypto.randomUUID())

  watch(sheet, (now) => {
    if (now && !feedback.value) feedback.value = now.proposedFeedback
  }, { immediate: true })

  const followed = computed(() => (sheet.value && sheet.value.submission.state !== 'decided' ? id : null))
  /** The submission moved while it was being looked at: offered, never forced under the reviewer's hands. */
  const moved = ref(false)
  useFollow(followed, computed(() => followed.value !== null), async () => {
    // The reviewer's own decision moves it too.
    if (sending.value || done.value) return
    const answer = await api.get<{ version: number, state: string }>(`/api/submissions/${id}`)
    if (answer.ok && sheet.value && !sending.value && !done.value && (answer.value.version !== sheet.value.submission.version || answer.value.state !== sheet.value.submission.state)) moved.value = true
  })
  async function look() {
    await refresh()
    moved.value = false
    refusal.value = null
  }

  function setOverride(criterion: CriterionView, result: ResultView, state: OverrideDraft['state'], reason: string) {
    const draft = { criterion: criterion.id, cylinder: result.cylinder, side: result.side, at: result.at, state, reason }
    overrides.value = [...overrides.value.filter(one => keyOf(one) !== keyOf(draft)), draft]
  }
  function dropOverride(criterion: CriterionView, result: ResultView) {
    overrides.value = overrides.value.filter(one => keyOf(one) !== keyOf({ ...result, criterion: criterion.id }))
  }
  const overrideOf = (criterion: CriterionView, result: ResultView) => overrides.value.find(one => keyOf(one) === keyOf({ ...result, criterion: criterion.id })) ?? null

  function addPin(photoId: string, spot: { x: number, y: number }, criterion: string) {
    pins.value = [...pins.value, { number: pins.value.length + 1, photoId, ...spot, criterion, text: '' }]
  }
  function movePin(number: number, spot: { x: number, y: number }) {
    pins.value = pins.value.map(pin => (pin.number === number ? { ...pin, ...spot } : pin))
  }
  function dropPin(number: number) {
    pins.value = pins.value.filter(pin => pin.number !== number).map((pin, index) => ({ ...pin, number: index + 1 }))
  }

  async function decide(decision: 'release' | 'send-back' | 'stop') {
    if (!sheet.value) return
    sending.value = true
    const edited = Object.entries(sentences.value).map(([where, text]) => {
      const [criterion = '', cylinder = '', side = '', at = ''] = where.split('|')
      return { criterion, cylinder: cylinder ? Number(cylinder) : null, side: side || null, at: at || null, text }
    })
    const answer = await api.post(`/api/submissions/${id}/review`, {
      seen: sheet.value.submission.version,
      seenWith: sheet.value.others.map(other => ({ id: other.id, version: other.version })),
      overrides: overrides.value,
      reasons: Object.entries(reasons.value).filter(([, reason]) => reason.trim()).map(([where, reason]) => {
        const [criterion = '', cylinder = '', side = ''] = where.split('|')
        return { criterion, cylinder: cylinder ? Number(cylinder) : null, side: side || null, reason }
      }),
      pins: pins.value.map(({ number: _number, ...pin }) => pin),
      feedback: feedback.value,
      ...(edited.length ? { sentences: edited } : {}),
      decision,
      point: sheet.value.submission.point?.code ?? null,
      ...(condition.value ? { condition: condition.value } : {}),
    }, key.value)
    sending.value = false
    if (answer.ok) {
      done.value = true
      refusal.value = null
      await refresh()
      return
    }
    // A refused review was not kept: the next try is a new one.
    if (answer.failure.status) key.value = crypto.randomUUID()
    refusal.value = answer.failure
    if (answer.failure.code === 'review_stale') moved.value = true
  }

  return { sheet, failure, loading, refresh, overrides, reasons, pins, sentences, feedback, condition, sending, refusal, done, moved, look, setOverride, dropOverride, overrideOf, addPin, movePin, dropPin, decide, keyOf }
}
