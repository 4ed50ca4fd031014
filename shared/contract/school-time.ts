const zone = 'Europe/London'
const day = new Intl.DateTimeFormat('en-GB', { timeZone: zone, weekday: 'long', day: 'numeric', month: 'long' })
const shortDay = new Intl.DateTimeFormat('en-GB', { timeZone: zone, day: 'numeric', month: 'short' })
const clock = new Intl.DateTimeFormat('en-GB', { timeZone: zone, hour: '2-digit', minute: '2-digit', hour12: false })

/** "Thursday 26 March", in the school's zone. */
export const longDate = (iso: string) => day.format(new Date(iso)).replace(',', '')
/** "26 Mar". */
export const shortDate = (iso: string) => shortDay.format(new Date(iso))
/** "26 Mar, 19:40". */
export const dateAndTime = (iso: string) => `${shortDay.format(new Date(iso))}, ${clock.format(new Date(iso))}`
/** "19:40". */
export const timeOfDay = (iso: string) => clock.format(new Date(iso))
