import { Agent, request } from 'node:http'
import type { EntityManager } from '@mikro-orm/postgresql'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { AuditLink } from '#server/db/entities/AuditLink'
import { BenchPlace, takingStates } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { emptyPlace } from '#server/services/places/empty-place'
import { sealAudit } from '#server/services/audit/seal-audit'
import { placeToken } from '#server/services/places/place-link'
import type { App } from '#server/utils/app'

export interface AskRound {
  /** Asks the server took. */
  asked: number
  places: number
  /** Benches taken afterwards: never more than the places. */
  taken: number
  /** Of them by this round's asks. */
  newOnes: number
  waiting: number
  /** List numbers are 1 to n, each once. */
  numbersWhole: boolean
  /** In the sealed audit record the asks stand in the order of their numbers. */
  auditInOrder: boolean
  /** What was answered instead, as "status code". */
  refused: string[]
}

/** Benches of a round's cohort; all but one are taken before. */
const benches = 8

/**
 * One round: a cohort with one place left is asked for by many at once, over HTTP, each from a loopback address of its own, so that
 * the throttle need not be switched off; then all links are opened at once. Says what came of it, from the database.
 */
export async function askRound({ url, urls = [url], em, app, code, asks, makeCohort }: {
  url: string
  /** Several web processes take turns. */
  urls?: readonly string[]
  em: () => EntityManager
  app: Pick<App, 'config'>
  code: string
  asks: number
  makeCohort: (places: number) => Promise<Cohort>
}): Promise<AskRound> {
  const cohort = await makeCohort(benches)
  await em().transactional(async (tx) => {
    for (let slot = 1; slot < benches; slot += 1) {
      tx.persist(tx.create(BenchPlace, { ...emptyPlace, cohort: tx.getReference(Cohort, cohort.id), name: `Taken ${slot}`, email: `taken-${slot}@${code.toLowerCase()}.example`, state: 'confirmed', slot, createdAt: new Date() }))
    }
  })
  const numbers = Array.from({ length: asks }, (_, index) => index)
  const to = (index: number) => urls[index % urls.length] ?? url
  const answers = await Promise.all(numbers.map(index => post(`${to(index)}/api/cohorts/${code}/asks`, { name: `Asker ${index}`, email: `asker-${index}@${code.toLowerCase()}.example` }, addressOf(index))))
  const kept = await em().find(BenchPlace, { cohort: cohort.id, listNumber: { $ne: null } }, { orderBy: { listNumber: 'asc' } })
  const opened = await Promise.all(kept.map((place, index) => post(`${to(index)}/api/place-links/${placeToken(app, place)}/open`, {}, addressOf(index))))

  await sealAudit(em(), 'asks')
  const all = await em().find(BenchPlace, { cohort: cohort.id })
  const taken = all.filter(place => takingStates.includes(place.state))
  return {
    asked: answers.filter(answer => answer.status === 202).length,
    places: benches,
    taken: taken.length,
    newOnes: taken.filter(place => place.listNumber !== null && place.listNumber !== undefined).length,
    waiting: all.filter(place => place.state === 'waiting-list').length,
    numbersWhole: kept.length === asks && kept.every((place, index) => place.listNumber === index + 1),
    auditInOrder: await asAudited(em(), kept),
    refused: [...answers.filter(answer => answer.status !== 202), ...opened.filter(answer => answer.status !== 200)].map(answer => `${answer.status} ${answer.code}`),
  }
}

/** Whether the numbered links of the asks follow the list. */
async function asAudited(em: EntityManager, kept: readonly BenchPlace[]): Promise<boolean> {
  const events = await em.find(AuditEvent, { action: 'place-asked', subject: { $in: kept.map(place => `place:${place.id}`) } })
  const links = await em.find(AuditLink, { event: { $in: events.map(event => event.id) } }, { populate: ['event'], orderBy: { number: 'asc' } })
  return links.length === kept.length && links.every((link, index) => link.event.$.subject === `place:${kept[index]?.id}`)
}

/** Each asker sits at an address of its own, 127.0.1.1 and on: all of 127.0.0.0/8 is this machine. */
const addressOf = (index: number) => `127.0.${1 + Math.floor(index / 250)}.${1 + index % 250}`

const agent = new Agent({ keepAlive: false })

function post(url: string, body: unknown, localAddress: string): Promise<{ status: number, code: string }> {
  return new Promise((resolve, reject) => {
    const sent = request(url, { method: 'POST', localAddress, agent, headers: { 'content-type': 'application/json' } }, (answer) => {
      const chunks: Buffer[] = []
      answer.on('data', (chunk: Buffer) => void chunks.push(chunk))
      answer.on('error', reject)
      answer.on('end', () => {
        const text = Buffer.concat(chunks).toString('utf8')
        const code = /"code":"(\w+)"/.exec(text)?.[1] ?? ''
        resolve({ status: answer.statusCode ?? 0, code })
      })
    })
    sent.on('error', reject)
    sent.end(JSON.stringify(body))
  })
}
