import type { JudgedUnit } from './evidence'
import { formatLength } from '../units/format-length'

/** Names of the standard photo views (handbook 2.0). */
export const viewNames: Readonly<Record<string, string>> = {
  'view-1': 'Deck',
  'view-2': 'Chamber',
  'view-3': 'Chamber, raking light',
  'view-4': 'Intake bowl',
  'view-5': 'Exhaust bowl',
  'view-6': 'Intake face',
  'view-7': 'Exhaust face',
  'view-8': 'Short turn',
  'view-9': 'Slice, mould or sawn',
  'view-10': 'Instrument and reading',
  'view-11': 'Wall gauge',
  'view-12': 'Seat close-up',
  'view-13': 'Bench and person',
  'view-14': 'Flow set-up',
  'view-15': 'Stamp and card',
}

/** "seat-land" as people write it. */
export function quantityInWords(quantity: string): string {
  return quantity === 'rinse-ph' ? 'rinse pH' : quantity.replaceAll('-', ' ')
}

/** "cylinder 2 intake", "cylinder 2", "the intake side", "the head". */
export function unitInWords({ cylinder, side }: JudgedUnit): string {
  if (cylinder !== null) return side === null ? `cylinder ${cylinder}` : `cylinder ${cylinder} ${side}`
  return side === null ? 'the head' : `the ${side} side`
}

/** A spot as a sentence names it: a whole hour of the clock gets its "o'clock", everything else stays as it was written. */
export function spotInWords(spot: string): string {
  return /^\d{1,2}$/.test(spot) ? `${spot} o'clock` : spot
}

/** A lift in both units: half of the school's benches write inches. */
export function liftInWords(liftMm: number): string {
  return formatLength(liftMm, 2)
}

/** "a, b and c". */
export function listInWords(items: readonly string[]): string {
  if (items.length < 2) return items[0] ?? ''
  return `${items.slice(0, -1).join(', ')} and ${items[items.length - 1]}`
}
