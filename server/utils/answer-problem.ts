import { setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import { AdapterRefusal } from '../adapters/adapter-refusal'
import { refusals, type RefusalCode } from '#shared/contract/refusals'
import { Refusal } from './refusal'

/** A thrown refusal as RFC 9457 problem details; anything else is a fault, logged whole and told plainly. */
export function answerProblem(event: H3Event, thrown: unknown) {
  const refusal = asRefusal(thrown)
  setResponseHeader(event, 'content-type', 'application/problem+json')
  setResponseHeader(event, 'cache-control', 'no-store')
  if (!refusal) {
    console.error(`${event.method} ${event.path}`, thrown)
    setResponseStatus(event, 500)
    return { type: 'about:blank', title: 'Something broke on our side. Nothing you sent was lost; try again in a moment.', status: 500, code: 'fault' }
  }
  setResponseStatus(event, refusal.status)
  if (typeof refusal.extra.retryAfter === 'number') setResponseHeader(event, 'retry-after', refusal.extra.retryAfter)
  return { type: 'about:blank', title: refusal.message, status: refusal.status, code: refusal.code, ...refusal.extra }
}

function asRefusal(thrown: unknown): Refusal | null {
  if (thrown instanceof Refusal) return thrown
  if (thrown instanceof AdapterRefusal && thrown.code in refusals) return new Refusal(thrown.code as RefusalCode, thrown.message)
  return null
}
