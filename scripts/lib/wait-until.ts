import { setTimeout as sleep } from 'node:timers/promises'

/** Asks again and again until the answer is true; false when the time is up. */
export async function waitUntil(ask: () => boolean | Promise<boolean>, withinMs: number, everyMs = 50): Promise<boolean> {
  const end = performance.now() + withinMs
  for (;;) {
    if (await ask()) return true
    if (performance.now() >= end) return false
    await sleep(everyMs)
  }
}
