import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { describeApi, describedRoutes } from '../../scripts/lib/describe-api'
import { projectRoot } from '../../scripts/lib/project-root'

/** Routes open to everybody, each for its own reason (`why` in the route). One more needs a line here, so that it is meant. */
const open = [
  '/api/auth/{path}',
  '/api/cohorts/{code}/asks',
  '/api/cohorts/{code}/offer',
  '/api/courses',
  '/api/health',
  '/api/openapi.json',
  '/api/password/forgot',
  '/api/password/set',
  '/api/payments/returned',
  '/api/payments/webhook',
  '/api/place-links/{token}',
  '/api/place-links/{token}/open',
  '/api/place-links/{token}/pass',
  '/api/place-links/{token}/pay',
  '/api/place-links/{token}/receipts/{number}',
]

it('lets nobody in who is not signed in, but on the listed routes, each of which says why', async () => {
  const routes = await describedRoutes()
  const publicOnes = routes.filter(one => one.route.public)
  expect(publicOnes.map(one => one.path).sort()).toEqual(open)
  for (const { file, route } of publicOnes) expect(route.why ?? '', file).toMatch(/\w.+\./)
  for (const { file, route } of routes.filter(one => !one.route.public)) expect(route.access.length, file).toBeGreaterThan(0)
})

it('says in one sentence what each route is for', async () => {
  for (const { file, route } of await describedRoutes()) expect(route.summary, file).toMatch(/^[A-Z].*\.$/)
})

it('describes every route in server/openapi.json as it is now (npm run openapi)', async () => {
  const written: unknown = JSON.parse(readFileSync(join(projectRoot, 'server/openapi.json'), 'utf8'))
  expect(written).toEqual(JSON.parse(JSON.stringify(await describeApi())))
})
