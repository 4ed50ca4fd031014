import { convert } from '#shared/domain/units/convert'
import { roundToDoubt, type RoundedToDoubt } from '#shared/domain/units/round-to-doubt'

/** Units of the trade that are shown in pairs. What is not here (per cent, counts) has no other unit. */
const otherUnit: Partial<Record<string, { unit: string, moreDecimals: number }>> = {
  mm: { unit: 'in', moreDecimals: 1 },
  in: { unit: 'mm', moreDecimals: -1 },
  cfm: { unit: 'l/s', moreDecimals: 0 },
  mm2: { unit: 'in2', moreDecimals: 3 },
  cc: { unit: 'in3', moreDecimals: 2 },
}

/** A unit as it is written: mm2 is mm². */
export function writtenUnit(unit: string): string {
  if (unit === '1' || unit === '-' || unit === 'count') return ''
  return unit.replace(/ @28$/, '').replace(/([a-z])([23])(?=$|\/)/g, (_, letter: string, power: string) => `${letter}${power === '2' ? '²' : '³'}`).replace('inH2O', 'inH₂O').replace('deg', '°').trim()
}

/** The same value in the other unit people at the bench use, written out; null where there is none. `decimals` are those of the value as shown. */
export function inOtherUnit(value: number, unit: string, decimals: number): string | null {
  // A rubric's unit may say more than the unit: "mm proud".
  const [base = ''] = unit.split(' ')
  const other = otherUnit[base]
  if (!other || !Number.isFinite(value)) return null
  return `${convert(value, base, other.unit).toFixed(Math.max(0, decimals + other.moreDecimals))} ${writtenUnit(other.unit)}`
}

/** A number whose doubt is not known, with no more digits than it needs: at most three places, no trailing noughts from the conversion. */
export function withoutDoubt(value: number): { value: string, decimals: number } {
  const text = String(Number(value.toFixed(3)))
  return { value: text === '-0' ? '0' : text, decimals: text.split('.')[1]?.length ?? 0 }
}

/**
 * A value and its doubt as the school writes them: to the place of the doubt, without a nought that the doubt does not need.
 *
 * @throws {RangeError} as `roundToDoubt`
 * @example
 * writeWithDoubt(1.62, 0.08) // => { value: '1.62', doubt: '0.08', decimals: 2 }
 * writeWithDoubt(36.4967, 0.15) // => { value: '36.50', doubt: '0.15', decimals: 2 }
 */
export function writeWithDoubt(value: number, doubt: number): RoundedToDoubt {
  const rounded = roundToDoubt(value, doubt)
  if (!/\.\d*[1-9]\d*0$|^[1-9]\d*\.0$/.test(rounded.doubt)) return rounded
  const decimals = rounded.decimals - 1
  const shorter = value.toFixed(decimals)
  return { value: /^-[0.]+$/.test(shorter) ? shorter.slice(1) : shorter, doubt: rounded.doubt.slice(0, -1).replace(/\.$/, ''), decimals }
}
