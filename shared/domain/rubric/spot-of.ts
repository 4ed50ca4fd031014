/** Where a reading was taken, in parts; any of them may be absent. */
export interface SpotParts {
  spot?: string | undefined
  clock?: string | undefined
  station?: number | undefined
  height?: number | undefined
  direction?: string | undefined
}

/**
 * The spot of a reading in the words of the rubric's wants, from the parts it was given in; null when it has none.
 *
 * "12-6 upper" from a direction and a depth, "pushrod fore, station 20, height -8" from a face, a station and a height, "station 30"
 * from a station, "1:30" from a clock.
 *
 * @throws {RangeError} on a station or height that is not finite
 * @example
 * spotOf({ spot: 'pushrod fore', station: 20, height: 8 }) // => 'pushrod fore, station 20, height +8'
 */
export function spotOf({ spot, clock, station, height, direction }: SpotParts): string | null {
  for (const length of [station, height]) {
    if (length !== undefined && !Number.isFinite(length)) throw new RangeError('spotOf requires finite lengths')
  }
  const named = tidy(spot)
  const first = direction === undefined ? named ?? clockFace(clock) : [tidy(direction), named].filter(part => part !== null).join(' ')
  const parts = [
    first === '' ? null : first,
    named !== null && direction === undefined && clock !== undefined ? clockFace(clock) : null,
    station === undefined || (named?.includes('station') ?? false) ? null : `station ${station}`,
    height === undefined || (named?.includes('height') ?? false) ? null : `height ${height > 0 ? '+' : ''}${height}`,
  ].filter((part): part is string => part !== null)
  return parts.length === 0 ? null : parts.join(', ')
}

function tidy(text: string | undefined): string | null {
  const trimmed = text?.trim().replaceAll(/\s+/g, ' ').replaceAll(/[−–]/g, '-') ?? ''
  return trimmed === '' ? null : trimmed
}

/** "12", "1:30": without the minutes of a whole hour, the word, and a leading nought. */
function clockFace(clock: string | undefined): string | null {
  return tidy(clock)?.replace(/\s*o'?clock$/i, '').replace(/^0(?=\d)/, '').replace('.', ':').replace(/:00$/, '') ?? null
}
