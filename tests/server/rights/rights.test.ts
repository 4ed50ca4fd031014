import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { describedRoutes } from '../../../scripts/lib/describe-api'
import { openHarness, type Harness } from '../harness'
import type { Actor } from '#server/utils/actor'
import { serveApi, type Api } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { columns, matrix, type Column, type MatrixRow, type Outcome } from './matrix'
import { makeWorld, type World } from './world'

let harness: Harness, api: Api, school: TestSchool, world: World
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  world = await makeWorld(harness, school)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

it('has one row for every route, and no row without a route', async () => {
  const routes = (await describedRoutes()).flatMap(({ path, method }) => (method === null ? ['get', 'post'] : [method]).map(one => `${one.toUpperCase()} ${path}`))
  expect(matrix.map(row => row.route).sort()).toEqual([...routes].sort())
})

function person(column: Column): Actor | null {
  const who = { 'nobody': null, 'student': school.imre, 'other student': world.bettany, 'alumni': world.freya, 'instructor': school.hanne, 'other instructor': school.stranger, 'admin': school.corin, 'safety': school.ingrid }
  return who[column]
}

async function outcome(row: MatrixRow, column: Column): Promise<Outcome | string> {
  const owner = column === 'alumni' ? world.freya : school.imre
  // Each call is by a sign-in of its own: some routes end sessions.
  const who = person(column)
  const { path, body } = await row.call(world, owner, who ?? owner)
  const [method = 'GET'] = row.route.split(' ')
  const { cookie } = who ? await api.as(who) : api.nobody
  const stop = new AbortController()
  // Headers are enough, and all that a stream ever ends with.
  const answer = await fetch(`${api.url}${path}`, {
    method, redirect: 'manual', signal: stop.signal,
    headers: { ...(cookie ? { cookie } : {}), ...(method === 'GET' ? {} : { 'content-type': 'application/json' }) },
    ...(method === 'GET' ? {} : { body: JSON.stringify(body ?? {}) }),
  })
  const { status } = answer
  const code = status >= 400 && !/event-stream/.test(answer.headers.get('content-type') ?? '') ? ((await answer.json()) as { code?: string }).code : ''
  stop.abort()
  if (status === 401 || status === 403 || status === 404) return path.startsWith('/api/auth/') ? `${status} ${code}` : status
  return status >= 500 || status === 405 ? `${status} ${code}` : 'yes'
}

describe('rights', () => {
  it.each(matrix.map(row => [row.route, row] as const))('%s is for whom the matrix says', async (_route, row) => {
    const answered: Partial<Record<Column, Outcome | string>> = {}
    for (const column of columns) answered[column] = await outcome(row, column)
    expect(answered).toEqual(row.who)
  }, 60_000)
})
