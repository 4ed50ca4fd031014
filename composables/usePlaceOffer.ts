import { computed } from 'vue'
import { toFailure } from '#shared/contract/failure'
import type { CohortOffer } from '#shared/contract/places'

/** A cohort as a stranger sees it, awaited so that an unknown one answers 404 to search machines too. */
export async function usePlaceOffer(code: string) {
  const { data, error, refresh } = await useFetch<CohortOffer>(`/api/cohorts/${encodeURIComponent(code)}/offer`, { key: `cohort-offer-${code}`, deep: false, retry: false })
  const failure = computed(() => (error.value ? toFailure(error.value) : null))
  if (failure.value && failure.value.status >= 400 && failure.value.status < 500) throw createError({ statusCode: 404, statusMessage: 'Nothing here', fatal: true })
  return { cohort: data, failure, refresh }
}
