/**
 * The wall a spot of a map is on: what its name says before its first comma or number.
 *
 * @example
 * wallOfSpot('pushrod fore, station 20, height -8') // => 'pushrod fore'
 * wallOfSpot('fin root 2') // => 'fin root'
 */
export function wallOfSpot(spot: string): string {
  return (spot.toLowerCase().split(/,|\s\d/)[0] ?? '').trim()
}
