import { convert } from '#shared/domain/units/convert'

/** Units shown in pairs, and how many more places the other needs so that nothing is lost: 0.001 in is 0.025 mm. */
const otherUnit: Readonly<Record<string, { unit: string, written: string, moreDecimals: number }>> = {
  mm: { unit: 'in', written: 'in', moreDecimals: 1 },
  cfm: { unit: 'l/s', written: 'l/s', moreDecimals: 0 },
  mm2: { unit: 'in2', written: 'in²', moreDecimals: 3 },
  cc: { unit: 'in3', written: 'in³', moreDecimals: 2 },
}
const written: Readonly<Record<string, string>> = { 'mm2': 'mm²', 'count': '', '-': '', 'ratio': '', 'yes/no': '' }

/** What the rubric's unit says beside the unit itself ("mm proud" is measured in mm). */
const base = (unit: string): string => unit.split(' ')[0] ?? unit
const decimals = (value: number): number => String(Number(value.toFixed(4))).split('.')[1]?.length ?? 0
const inUnit = (text: string, unit: string): string => unit === '' ? text : `${text}${unit === '%' ? ' %' : ` ${unit}`}`

/**
 * A band in both units, as a person at the bench reads it.
 *
 * @example
 * bandInWords({ lo: 1.52, hi: 1.78 }, 'mm') // => '1.52 to 1.78 mm (0.060 to 0.070 in)'
 * bandInWords({ lo: 4, hi: null }, 'mm') // => 'at least 4 mm (0.157 in)'
 */
export function bandInWords({ lo, hi }: { lo: number | null, hi: number | null }, unit: string): string {
  if (unit === 'yes/no') return lo === 1 ? 'yes' : 'no'
  const own = base(unit)
  const places = Math.max(decimals(lo ?? 0), decimals(hi ?? 0))
  const text = inUnit(ends(lo, hi, value => value.toFixed(places)), written[own] ?? own)
  const other = otherUnit[own]
  if (!other || (lo === null && hi === null)) return text
  const otherPlaces = Math.max(places, own === 'mm' ? 2 : 0) + other.moreDecimals
  return `${text} (${inUnit(ends(lo, hi, value => convert(value, own, other.unit).toFixed(otherPlaces), ''), other.written)})`
}

/** One figure in both units. @example figureInWords(3, 'mm') // => '3 mm (0.118 in)' */
export function figureInWords(value: number, unit: string): string {
  return bandInWords({ lo: value, hi: value }, unit)
}

function ends(lo: number | null, hi: number | null, write: (value: number) => string, least = 'at least '): string {
  const most = least === '' ? '' : 'at most '
  if (lo !== null && hi !== null) return lo === hi ? write(lo) : `${write(lo)} to ${write(hi)}`
  if (lo !== null) return `${least}${write(lo)}`
  return hi === null ? 'no limit' : `${most}${write(hi)}`
}
