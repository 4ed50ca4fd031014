export interface Clock {
  /** Real time: for sessions, signatures, timers. */
  now: () => Date
  /** The school's date: for clearances, waits, ages of evidence. Real time, or in the demo its own date moving on. */
  schoolNow: () => Date
}

/**
 * @param demo where the demo's date stood when it was seeded, as ISO instants; null for a school that lives in real time
 * @param real the machine's clock, to be replaced in tests
 * @throws {RangeError} when either instant cannot be read
 */
export function createClock(demo: { demoNow: string, seededAt: string } | null, real: () => Date = () => new Date()): Clock {
  if (!demo) return { now: real, schoolNow: real }
  const ahead = Date.parse(demo.demoNow) - Date.parse(demo.seededAt)
  if (!Number.isFinite(ahead)) throw new RangeError(`createClock cannot read "${demo.demoNow}" and "${demo.seededAt}" as instants`)
  return { now: real, schoolNow: () => new Date(real().getTime() + ahead) }
}
