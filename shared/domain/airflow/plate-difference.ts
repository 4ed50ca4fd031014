import { assertPositive } from './assert-positive'

/**
 * Plate today against its nominal (or after against before), per cent; above zero reads high.
 *
 * Both plate figures are written at 1.2041 kg/m3, so no density comes in.
 *
 * Units: any one flow unit; per cent.
 * Source: handbook 4.2.
 *
 * @throws {RangeError} unless both are above zero
 */
export function plateDifference(reading: number, nominal: number): number {
  assertPositive('plateDifference', { 'plate reading': reading, 'plate nominal': nominal })
  return 100 * (reading / nominal - 1)
}
