import { Problem } from '../lib/problem'
import { schoolInstant } from './school-instant'

/**
 * The instant after `--until`, or the one given for when it is left out.
 *
 * @throws {Problem} on anything else on the command line, and on an instant that cannot be read
 */
export function readUntil(args: readonly string[], otherwise: string): Date {
  const [flag, text = otherwise, ...rest] = args
  const usage = 'Say npm run seed, or npm run seed -- --until 2026-03-26T19:40'
  if ((flag !== undefined && flag !== '--until') || rest.length > 0 || (flag !== undefined && args.length === 1)) throw new Problem(usage)
  try {
    return schoolInstant(text)
  }
  catch (thrown) {
    if (thrown instanceof RangeError) throw new Problem(`${thrown.message}. ${usage}`)
    throw thrown
  }
}
