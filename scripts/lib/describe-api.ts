import type { ZodTypeAny } from 'zod'
import { zodToJsonSchema } from 'zod-to-json-schema'
import { apiFiles, type ApiFile } from './api-files'

/** What a route file says of itself (`defineRoute`, `definePublicRoute`). */
export interface Described {
  summary: string
  access: readonly string[]
  public: boolean
  why?: string
  params?: ZodTypeAny
  query?: ZodTypeAny
  body?: ZodTypeAny
  answer?: ZodTypeAny
  status?: number
  keeps?: boolean
}
export interface DescribedFile extends ApiFile { route: Described }

/** Every route with what it says of itself. The catch-all at the root is no route: it answers what the others do not take. */
export async function describedRoutes(): Promise<DescribedFile[]> {
  const routes: DescribedFile[] = []
  for (const file of apiFiles()) {
    if (file.path === '/api/{path}') continue
    const loaded = await import(file.absolute) as { default?: { route?: Described } }
    if (!loaded.default?.route) throw new Error(`${file.file} is neither a defineRoute nor a definePublicRoute`)
    routes.push({ ...file, route: loaded.default.route })
  }
  return routes
}

/** OpenAPI 3.1 of every route, with its keys in a fixed order. */
export async function describeApi(): Promise<Record<string, unknown>> {
  const paths: Record<string, Record<string, unknown>> = {}
  for (const { path, method, route } of await describedRoutes()) {
    for (const one of method === null ? ['get', 'post'] : [method]) paths[path] = { ...paths[path], [one]: operation(path, route) }
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Witness Mark', version: '1', description: 'Errors are problem details (RFC 9457) with a stable `code` and, for input, `issues`. Unsafe methods need `Content-Type: application/json`.' },
    components: {
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'authjs.session-token', description: 'From /api/auth/callback/credentials; over https its name begins with __Secure-.' } },
      schemas: { Problem: problem },
    },
    paths: Object.fromEntries(Object.entries(paths).sort(([a], [b]) => (a < b ? -1 : 1))),
  }
}

const problem = {
  type: 'object',
  required: ['type', 'title', 'status', 'code'],
  properties: {
    type: { type: 'string' },
    title: { type: 'string', description: 'A sentence a person can act on.' },
    status: { type: 'integer' },
    code: { type: 'string', description: 'Stable.' },
    issues: { type: 'array', items: { type: 'object', required: ['path', 'message'], properties: { path: { type: 'string' }, message: { type: 'string' } } } },
  },
}

function operation(path: string, route: Described) {
  const named = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name ?? '')
  const params = properties(route.params)
  const query = properties(route.query)
  const headers = route.keeps ? [{ name: 'Idempotency-Key', in: 'header', required: false, description: 'A UUID: the same key and body give the first answer again.', schema: { type: 'string', format: 'uuid' } }] : []
  const parameters = [
    ...named.map(name => ({ name, in: 'path', required: true, schema: params.of[name] ?? { type: 'string' } })),
    ...Object.entries(query.of).map(([name, schema]) => ({ name, in: 'query', required: query.required.includes(name), schema })),
    ...headers,
  ]
  return {
    summary: route.summary,
    ...(route.public ? { description: route.why, security: [] } : { description: `For: ${route.access.join(', ')}.`, security: [{ session: [] }] }),
    ...(parameters.length > 0 ? { parameters } : {}),
    ...(route.body ? { requestBody: { required: true, content: { 'application/json': { schema: asJson(route.body) } } } } : {}),
    responses: {
      [String(route.status ?? 200)]: { description: 'As asked.', content: { 'application/json': route.answer ? { schema: asJson(route.answer) } : {} } },
      default: { description: 'A refusal.', content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } },
    },
  }
}

function asJson(schema: ZodTypeAny): Record<string, unknown> {
  const { $schema, ...rest } = zodToJsonSchema(schema, { target: 'jsonSchema2019-09', $refStrategy: 'none' }) as Record<string, unknown>
  return rest
}

function properties(schema: ZodTypeAny | undefined): { of: Record<string, unknown>, required: string[] } {
  const json = schema ? asJson(schema) : {}
  return { of: (json.properties ?? {}) as Record<string, unknown>, required: (json.required ?? []) as string[] }
}
