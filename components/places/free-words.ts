/** "6 of 8 places free", "1 of 8 places free", "No place free, 3 on the list". */
export function freeWords({ places, placesLeft, waiting }: { places: number, placesLeft: number, waiting: number }): string {
  if (placesLeft > 0) return `${placesLeft} of ${places} places free`
  return waiting > 0 ? `No place free, ${waiting} on the list` : 'No place free'
}
