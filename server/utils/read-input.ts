import { getQuery, getRouterParams, type H3Event } from 'h3'
import type { ZodTypeAny } from 'zod'
import { readBodyWithin } from './read-body'
import { Refusal } from './refusal'

/**
 * What a route was given, checked: path, query and JSON body.
 * @throws {Refusal} id_invalid, input_invalid, json_needed, body_not_json or body_too_large
 */
export async function readInput(event: H3Event, definition: { params?: ZodTypeAny, query?: ZodTypeAny, body?: ZodTypeAny, maxBytes?: number }) {
  return {
    params: definition.params ? readParams(definition.params, getRouterParams(event, { decode: true })) : undefined,
    query: definition.query ? parse(definition.query, getQuery(event)) : undefined,
    body: definition.body ? parse(definition.body, await readJson(event, definition.maxBytes ?? 65_536)) : undefined,
  }
}

function readParams(schema: ZodTypeAny, given: unknown): unknown {
  const read = schema.safeParse(given)
  if (!read.success) throw new Refusal('id_invalid')
  return read.data
}

function parse(schema: ZodTypeAny, given: unknown): unknown {
  const read = schema.safeParse(given)
  if (read.success) return read.data
  throw new Refusal('input_invalid', undefined, {
    issues: read.error.issues.slice(0, 50).map(issue => ({ path: issue.path.join('.'), message: issue.message })),
  })
}

async function readJson(event: H3Event, maxBytes: number): Promise<unknown> {
  const type = event.node.req.headers['content-type'] ?? ''
  if (!/^application\/json\b/i.test(type)) throw new Refusal('json_needed')
  const raw = (await readBodyWithin(event, maxBytes)).toString('utf8')
  try {
    return JSON.parse(raw || '{}')
  }
  catch {
    throw new Refusal('body_not_json')
  }
}
