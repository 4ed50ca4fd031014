/**
 * Whether two names mean one spot on the iron, capitals, spaces, kinds of minus sign and "12:00" for "12" aside.
 */
export function sameSpot(one: string | null, other: string | null): boolean {
  if (one === null || other === null) return one === other
  return tidy(one) === tidy(other)
}

function tidy(spot: string): string {
  return spot.trim().toLowerCase().replaceAll(/[−–]/g, '-').replaceAll(/\s+/g, ' ').replace(/\s*,\s*/g, ', ').replace(/^(\d{1,2}):00$/, '$1').replace(/^0(\d)/, '$1')
}
