const dayMs = 86_400_000

/** Which week of a cohort's course a moment falls in, and of how many; nulls before, after, or without a cohort. */
export function weekOf(cohort: { startsOn: string, endsOn: string } | null, now: Date): { week: number | null, weeks: number | null } {
  if (!cohort) return { week: null, weeks: null }
  const start = Date.parse(cohort.startsOn)
  const weeks = Math.floor((Date.parse(cohort.endsOn) - start) / dayMs / 7) + 1
  const week = Math.floor((now.getTime() - start) / dayMs / 7) + 1
  return week >= 1 && week <= weeks ? { week, weeks } : { week: null, weeks }
}
