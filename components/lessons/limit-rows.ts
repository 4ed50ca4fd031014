import type { LimitBand, LimitView } from '#shared/contract/lessons'

/** Where a band applies, in words; empty where the criterion has one band for all. Lifts are told by their share, as the rubric keeps them. */
export function bandWhere(band: Pick<LimitBand, 'side' | 'at' | 'liftShare'>): string {
  const lift = band.liftShare === null ? '' : `at ${Math.round(band.liftShare * 100)} % lift`
  return [band.side ?? '', band.at ?? '', lift].filter(Boolean).join(', ')
}

/** The bands of a limit with where each applies. Bands that say the same (both sides alike) stand once, with no "where" they do not need. */
export function limitRows(limit: Pick<LimitView, 'bands'>): { where: string, own: string, other: string, band: LimitBand }[] {
  const groups = new Map<string, { where: string[], band: LimitBand }>()
  for (const band of limit.bands) {
    const key = `${band.words}|${band.hard ?? ''}|${JSON.stringify(band.band)}`
    const group = groups.get(key) ?? { where: [], band }
    group.where.push(bandWhere(band))
    groups.set(key, group)
  }
  return [...groups.values()].map(({ where, band }) => ({ where: groups.size === 1 ? '' : [...new Set(where)].filter(Boolean).join('; '), ...twoUnits(band.words), band }))
}

/** "1.52 to 1.78 mm (0.060 to 0.070 in)" in its two halves, for two lines of a narrow screen. */
function twoUnits(words: string): { own: string, other: string } {
  const halves = /^(.*\S) \(([^()]+)\)$/.exec(words)
  return { own: halves?.[1] ?? words, other: halves?.[2] ?? '' }
}
