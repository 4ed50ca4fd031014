/**
 * Whether two names mean one spot on the iron, capitals, spaces, kinds of minus sign and "12:00" for "12" aside.
 */
export function sameSpot(one: string | null, other: string | null): boolean {
  if (one === other) return true
  if (one === null || other === null) return false
  return (untidy.test(one) || untidy.test(other)) && tidy(one) === tidy(other)
}

/** What `tidy` would change. Nearly every name is tidy already, and a page compares tens of thousands: asking first is several times quicker. */
const untidy = /[^ -~]|[A-Z]|^ | $| {2}| ,|,(?! )|^\d{1,2}:00$|^0\d/

function tidy(spot: string): string {
  return spot.trim().toLowerCase().replaceAll(/[−–]/g, '-').replaceAll(/\s+/g, ' ').replace(/\s*,\s*/g, ', ').replace(/^(\d{1,2}):00$/, '$1').replace(/^0(\d)/, '$1')
}
