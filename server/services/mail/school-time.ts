/** An instant as people of the school read it, in the school's zone: "19:40 on Thursday 26 March". */
export function schoolTime(at: Date, zone = 'Europe/London'): string {
  const time = new Intl.DateTimeFormat('en-GB', { timeZone: zone, hour: '2-digit', minute: '2-digit' }).format(at)
  const day = new Intl.DateTimeFormat('en-GB', { timeZone: zone, weekday: 'long', day: 'numeric', month: 'long' }).format(at)
  return `${time} on ${day.replace(',', '')}`
}
