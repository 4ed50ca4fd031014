/**
 * An amount in minor units written out, without its currency: 105000 is "1,050.00".
 *
 * @throws {RangeError} when it is not a whole number of minor units
 */
export function plainAmount(minor: number): string {
  if (!Number.isSafeInteger(minor)) throw new RangeError('plainAmount requires a whole number of minor units')
  const whole = String(Math.floor(Math.abs(minor) / 100)).replace(/\B(?=(\d{3})+$)/g, ',')
  return `${minor < 0 ? '-' : ''}${whole}.${String(Math.abs(minor) % 100).padStart(2, '0')}`
}
