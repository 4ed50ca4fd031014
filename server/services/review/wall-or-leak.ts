import type { Criterion } from '#shared/domain/rubric/criterion'

const quantities = new Set(['wall-thickness', 'guide-boss-width', 'pressure-drop'])

/** Whether a stop of this criterion is about a wall or a leak, which have first words of their own (handbook 7). */
export function isWallOrLeak(criterion: Pick<Criterion, 'safetyStop' | 'quantity'>): boolean {
  return criterion.safetyStop && quantities.has(criterion.quantity)
}
