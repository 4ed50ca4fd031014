import { onMounted, shallowRef } from 'vue'
import type { RubricSummary, RubricView } from '#shared/contract/views'
import { useApi } from './useApi'

/** Criteria of the newest rubric, by title, for a limit in a lesson. */
export function useRubricChoices() {
  const api = useApi()
  const criteria = shallowRef<{ id: string, title: string, stage: string }[]>([])
  onMounted(async () => {
    const versions = await api.get<RubricSummary[] | { items: RubricSummary[] }>('/api/rubrics')
    if (!versions.ok) return
    const newest = (Array.isArray(versions.value) ? versions.value : versions.value.items)[0]
    const rubric = newest && await api.get<RubricView>(`/api/rubrics/${newest.version}`)
    if (rubric?.ok) criteria.value = rubric.value.rubric.stages.flatMap(stage => stage.criteria.map(({ id, title }) => ({ id, title, stage: `Op ${stage.op}, ${stage.name}` })))
  })
  return { criteria }
}
