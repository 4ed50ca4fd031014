import { computed, onMounted, ref, shallowRef, watch, type Ref } from 'vue'
import type { GaugeView, SubmissionView } from '#shared/contract/views'
import type { CriterionResult } from '#shared/domain/rubric/evidence'
import { useApi } from './useApi'
import type { useReadingPad } from './useReadingPad'

type Preview = typeof import('#shared/domain/rubric/preview-reading')

/**
 * What the figures on the pad would come to, by the same code the server scores with. Fetched after the page stands,
 * so that typing never waits for it; a pad without it still works.
 */
export function useReadingPreview(submissionId: string, submission: Ref<SubmissionView | null | undefined>, pad: ReturnType<typeof useReadingPad>) {
  const api = useApi()
  const gauges = shallowRef<GaugeView | null>(null)
  const code = shallowRef<Preview | null>(null)
  const results = ref<CriterionResult[]>([])

  onMounted(async () => {
    const answer = await api.get<GaugeView>(`/api/submissions/${submissionId}/gauges`)
    if (answer.ok) gauges.value = answer.value
    code.value = await import('#shared/domain/rubric/preview-reading').catch(() => null)
  })

  const typed = computed(() => ({ spot: pad.spot.value?.want ?? null, values: [...pad.values.value, ...(pad.typing.value ? [pad.typing.value] : [])], unit: pad.unit.value, instrument: pad.fit.value.find(one => one.code === pad.instrument.value) ?? null }))
  watch([typed, gauges, code], () => {
    const now = typed.value
    results.value = []
    if (!code.value || !gauges.value || !submission.value || !now.spot || !now.instrument || !now.values.length) return
    results.value = code.value.previewReading({ ...gauges.value, op: submission.value.op, part: submission.value.part, ports: submission.value.ports, want: now.spot, typed: now.values, unit: now.unit, instrument: now.instrument })
  })
  return { results }
}
