import { createHash } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { defineEventHandler, setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import { z, type ZodTypeAny } from 'zod'
import { IdempotencyKey } from '../db/entities/IdempotencyKey'
import { User, type Role } from '../db/entities/User'
import type { Actor } from './actor'
import { answerProblem } from './answer-problem'
import { getApp, type App } from './app'
import { canonicalJson } from './canonical-json'
import { readInput } from './read-input'
import { Refusal } from './refusal'
import { readSession } from './session'

type Read<Schema> = Schema extends ZodTypeAny ? z.output<Schema> : undefined

export interface RouteDefinition<Params, Query, Body> {
  /** Roles that may call it. Ownership is the service's: it goes in the query. */
  access: readonly Role[]
  /** One sentence for /api/openapi.json. */
  summary: string
  params?: Params
  query?: Query
  body?: Body
  /** Shape of the answer, for /api/openapi.json. */
  answer?: ZodTypeAny
  /** Status of a good answer; 200 unless said. A handler may set another. */
  status?: number
  /** Keeps something: takes an Idempotency-Key. */
  keeps?: boolean
  maxBytes?: number
}

export interface RouteContext<Params, Query, Body> {
  event: H3Event
  app: App
  actor: Actor
  /** Its own identity map; inside a transaction when the call carries an Idempotency-Key. */
  em: EntityManager
  params: Read<Params>
  query: Read<Query>
  body: Read<Body>
}

/**
 * A route: who, then what, then work. Refusals become problem details; the first answer to an
 * Idempotency-Key is stored in the transaction that did the work, and given again.
 */
export function defineRoute<
  Params extends ZodTypeAny | undefined = undefined,
  Query extends ZodTypeAny | undefined = undefined,
  Body extends ZodTypeAny | undefined = undefined,
>(definition: RouteDefinition<Params, Query, Body>, work: (context: RouteContext<Params, Query, Body>) => Promise<unknown>) {
  const handler = defineEventHandler(async (event) => {
    try {
      const app = await getApp()
      const em = app.orm.em.fork()
      const actor = await readSession(event, em)
      if (!actor) throw new Refusal('sign_in_needed')
      if (!definition.access.some(role => actor.roles.includes(role))) throw new Refusal('not_allowed')

      const input = await readInput(event, definition)
      setResponseHeader(event, 'cache-control', 'no-store')
      if (definition.status) setResponseStatus(event, definition.status)
      const key = definition.keeps ? readKey(event) : null
      if (!key) return await work({ event, app, actor, em, ...input } as RouteContext<Params, Query, Body>)
      return await once(event, em, actor, key, input.body, tx => work({ event, app, actor, em: tx, ...input } as RouteContext<Params, Query, Body>))
    }
    catch (thrown) {
      return answerProblem(event, thrown)
    }
  })
  return Object.assign(handler, { route: { ...definition, public: false as const } })
}

function readKey(event: H3Event): string | null {
  const key = event.node.req.headers['idempotency-key']
  if (key === undefined) return null
  if (!z.string().uuid().safeParse(key).success) throw new Refusal('idempotency_key_invalid')
  return String(key).toLowerCase()
}

async function once(event: H3Event, em: EntityManager, actor: Actor, key: string, body: unknown, work: (tx: EntityManager) => Promise<unknown>): Promise<unknown> {
  const route = `${event.method} ${event.path.split('?')[0]}`.slice(0, 200)
  const bodyHash = createHash('sha256').update(route).update('\n').update(canonicalJson(body ?? null)).digest('hex')
  return em.transactional(async (tx) => {
    // The second of two calls with one key waits here until the first has committed, then sees its answer.
    await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(?, 0))', [`${actor.id}:${key}`], 'run', tx.getTransactionContext())
    const first = await tx.findOne(IdempotencyKey, { person: actor.id, key })
    if (first) {
      if (first.bodyHash !== bodyHash) throw new Refusal('idempotency_conflict')
      setResponseStatus(event, first.status)
      return first.answer
    }
    const answer = await work(tx)
    tx.persist(tx.create(IdempotencyKey, { person: tx.getReference(User, actor.id), key, route, bodyHash, status: event.node.res.statusCode, answer: answer ?? null, at: new Date() }))
    return answer
  })
}

