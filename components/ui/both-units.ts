import { convert } from '#shared/domain/units/convert'
import { writtenUnit } from './written-unit'

/** Units of the trade that are shown in pairs. What is not here (per cent, counts) has no other unit. */
const otherUnit: Partial<Record<string, { unit: string, moreDecimals: number }>> = {
  mm: { unit: 'in', moreDecimals: 1 },
  in: { unit: 'mm', moreDecimals: -1 },
  cfm: { unit: 'l/s', moreDecimals: 0 },
  mm2: { unit: 'in2', moreDecimals: 3 },
  cc: { unit: 'in3', moreDecimals: 2 },
}

/** The same value in the other unit people at the bench use, written out; null where there is none. `decimals` are those of the value as shown. */
export function inOtherUnit(value: number, unit: string, decimals: number): string | null {
  // A rubric's unit may say more than the unit: "mm proud".
  const [base = ''] = unit.split(' ')
  const other = otherUnit[base]
  if (!other || !Number.isFinite(value)) return null
  return `${convert(value, base, other.unit).toFixed(Math.max(0, decimals + other.moreDecimals))} ${writtenUnit(other.unit)}`
}
