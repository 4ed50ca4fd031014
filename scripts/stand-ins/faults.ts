import type { IncomingMessage, ServerResponse } from 'node:http'
import { text } from 'node:stream/consumers'

/** Counters a test sets and the stand-in counts down; a number in `slowMs` stays until it is set back to 0. */
export type Faults<Name extends string> = Record<Name, number>

/**
 * Answers `GET /_faults` and `POST /_faults { name: number }`, to this machine alone.
 *
 * A page in somebody's browser must not be able to switch faults on: the header cannot be sent from another origin
 * without asking first, and nobody here says yes.
 *
 * @returns whether the request was one of these
 */
export async function answerFaults<Name extends string>(faults: Faults<Name>, request: IncomingMessage, response: ServerResponse): Promise<boolean> {
  if (request.url !== '/_faults') return false
  const say = (status: number, body: unknown) => {
    response.writeHead(status, { 'content-type': 'application/json' }).end(JSON.stringify(body))
    return true
  }
  if (!['127.0.0.1', '::1', '::ffff:127.0.0.1'].includes(request.socket.remoteAddress ?? '')) return say(403, { error: 'only from this machine' })
  if (request.headers['x-stand-in'] !== 'faults') return say(403, { error: 'send the header x-stand-in: faults' })
  if (request.method === 'GET') return say(200, faults)
  if (request.method !== 'POST') return say(405, { error: 'GET or POST' })
  let wanted: Record<string, unknown>
  try {
    wanted = JSON.parse(await text(request)) as Record<string, unknown>
  }
  catch {
    return say(400, { error: 'not JSON' })
  }
  for (const [name, value] of Object.entries(wanted)) {
    if (!(name in faults) || typeof value !== 'number' || !Number.isInteger(value) || value < 0) {
      return say(422, { error: `names are ${Object.keys(faults).join(', ')}; values are whole numbers from 0` })
    }
  }
  Object.assign(faults, wanted)
  return say(200, faults)
}
