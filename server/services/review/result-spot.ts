import { spotInWords, unitInWords } from '#shared/domain/rubric/words'
import type { Side } from '#shared/domain/units/port'

/** A result's own spot, with null for what it has not. */
export function spotOf({ cylinder, side, at }: { cylinder?: number | null, side?: Side | null, at?: string | null }): { cylinder: number | null, side: Side | null, at: string | null } {
  return { cylinder: cylinder ?? null, side: side ?? null, at: at ?? null }
}

/** Where a result is of, in words: "12 o'clock, cylinder 2 intake". */
export function resultSpot(of: Parameters<typeof spotOf>[0]): string {
  const { cylinder, side, at } = spotOf(of)
  const unit = unitInWords({ cylinder, side })
  return at === null ? unit : `${spotInWords(at)}, ${unit}`
}
