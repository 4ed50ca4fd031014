/**
 * Angle of a clock position, radians from 12 o'clock, clockwise. "12" is 0, "3" is a quarter turn, "10:30" half-way between ten and eleven.
 * Null for a spot that is not on the clock ("bowl, fore").
 */
export function clockAngle(spot: string): number | null {
  const parts = /^(\d{1,2})(?::([0-5]\d))?$/.exec(spot.trim())
  if (!parts) return null
  const hours = Number(parts[1])
  if (hours < 1 || hours > 12) return null
  return ((hours % 12) + Number(parts[2] ?? 0) / 60) * Math.PI / 6
}

/** The clock positions of a spot: one for "10:30", two ends for a direction across ("12-6"); empty when it is not on the clock. A depth after it ("12-6 lower") is left aside. */
export function clockAngles(spot: string): number[] {
  const across = /^(\d{1,2})-(\d{1,2})(?: .*)?$/.exec(spot.trim())
  if (!across) {
    const one = clockAngle(spot)
    return one === null ? [] : [one]
  }
  const ends = [across[1], across[2]].map(end => clockAngle(end ?? ''))
  return ends.every(end => end !== null) ? ends.filter(end => end !== null) : []
}
