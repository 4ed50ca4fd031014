import { request } from 'node:http'
import { text } from 'node:stream/consumers'
import { setTimeout as wait } from 'node:timers/promises'
import { Problem } from '../lib/problem'

const visitorWaitsMs = 120_000

/** Sends JSON from a network address of this machine: all of 127.0.0.0/8 is it. */
export async function post(address: string, body: unknown, localAddress: string): Promise<{ status: number, body: unknown }> {
  const { hostname, port, pathname } = new URL(address)
  return new Promise((resolve, reject) => {
    const sent = request({ hostname, port, path: pathname, method: 'POST', localAddress, headers: { 'content-type': 'application/json' }, timeout: 60_000 }, (answer) => {
      text(answer).then(said => resolve({ status: answer.statusCode ?? 0, body: said === '' ? null : JSON.parse(said) as unknown }), reject)
    })
    sent.once('timeout', () => sent.destroy(new Error('no answer within a minute')))
    sent.once('error', reject)
    sent.end(JSON.stringify(body))
  })
}

/** Again and again while nothing answers or it is the server's fault; anything else that is no success ends the run. */
export async function patiently(what: string, work: () => Promise<{ status: number, body: unknown }>): Promise<unknown> {
  const end = performance.now() + visitorWaitsMs
  for (;;) {
    const answer = await work().catch(() => null)
    if (answer && answer.status < 300) return answer.body
    if (answer && answer.status < 500) throw new Problem(`${what} answered ${answer.status} ${JSON.stringify(answer.body)}`)
    if (performance.now() > end) throw new Problem(`${what} did not succeed within ${visitorWaitsMs / 1000} s; last ${answer ? `${answer.status} ${JSON.stringify(answer.body)}` : 'no answer'}`)
    await wait(300)
  }
}
