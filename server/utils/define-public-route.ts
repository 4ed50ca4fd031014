import type { EntityManager } from '@mikro-orm/postgresql'
import { defineEventHandler, setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import type { z, ZodTypeAny } from 'zod'
import { answerProblem } from './answer-problem'
import { getApp, type App } from './app'
import { readInput } from './read-input'

type Read<Schema> = Schema extends ZodTypeAny ? z.output<Schema> : undefined

/** A route open to everybody. Each says why; `tests/meta` lists them by name. */
export function definePublicRoute<Params extends ZodTypeAny | undefined = undefined, Body extends ZodTypeAny | undefined = undefined>(
  definition: { why: string, summary: string, params?: Params, body?: Body, answer?: ZodTypeAny, status?: number, maxBytes?: number },
  work: (context: { event: H3Event, app: App, em: EntityManager, params: Read<Params>, body: Read<Body> }) => Promise<unknown>,
) {
  const handler = defineEventHandler(async (event) => {
    try {
      const app = await getApp()
      const input = await readInput(event, definition)
      setResponseHeader(event, 'cache-control', 'no-store')
      if (definition.status) setResponseStatus(event, definition.status)
      return await work({ event, app, em: app.orm.em.fork(), ...input } as never)
    }
    catch (thrown) {
      return answerProblem(event, thrown)
    }
  })
  return Object.assign(handler, { route: { ...definition, access: [] as never[], public: true as const } })
}
