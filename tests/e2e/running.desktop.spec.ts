import { createHash, randomBytes } from 'node:crypto'
import { s3Storage } from '../../server/adapters/storage/s3'
import { expect, ready, signIn, test } from './walk'

test('sends a stranger to the sign-in page, and in with the right password alone', async ({ page }) => {
  await page.goto('/')
  await expect(page).toHaveURL(/\/login/)
  await ready(page)
  await page.getByLabel(/e-?mail/i).fill('imre@sallowbeck.example')
  await page.getByLabel(/password/i).first().fill('not the password')
  await page.getByRole('button', { name: /sign in/i }).click()
  await expect(page.getByRole('alert')).toBeVisible()
  await page.getByLabel(/password/i).first().fill('slow-hands-true-numbers')
  await page.getByRole('button', { name: /sign in/i }).click()
  await expect(page).not.toHaveURL(/\/login/)
  expect((await page.request.get('/api/me')).status()).toBe(200)
})

test('says that all is well', async ({ request }) => {
  expect(await (await request.get('/api/health')).json()).toMatchObject({ ok: true })
})

test('lets a page send a file straight to storage under its own policy, once and unchanged', async ({ page, school }) => {
  await signIn(page, 'imre')
  await page.goto('/')
  const storage = s3Storage(school.storage)
  const body = randomBytes(20_000)
  const signed = await storage.signPut({ key: `walk-${Date.now()}`, bytes: body.length, contentType: 'image/jpeg', sha256: createHash('sha256').update(body).digest('hex') })
  const send = (bytes: number[]) => page.evaluate(async ({ signed, bytes }) => {
    const answer = await fetch(signed.url, { method: 'PUT', headers: signed.headers, body: new Uint8Array(bytes) })
    return [answer.status, answer.headers.get('etag') !== null]
  }, { signed, bytes })
  expect(await send([...body])).toEqual([200, true])
})

test('keeps pages from talking to anybody else', async ({ request, school }) => {
  const policy = (await request.get('/login')).headers()['content-security-policy'] ?? ''
  const sources = (directive: string) => policy.split(';').map(one => one.trim().split(' ')).find(([name]) => name === directive)?.slice(1)
  expect(sources('connect-src')).toEqual(['\'self\'', school.s3.url])
  expect(sources('img-src')).toEqual(['\'self\'', 'data:', 'blob:', school.s3.url])
  expect(sources('media-src')).toEqual(['\'self\'', 'blob:', school.s3.url])
})

test('comes back after the web and the worker were killed', async ({ request, school }) => {
  const all = [school.stack.web, school.stack.worker]
  const before = all.map(one => one.mark()?.pid ?? 0)
  for (const pid of before) process.kill(pid, 'SIGKILL')
  await expect.poll(() => all.every((one, at) => one.mark() !== null && one.mark()?.pid !== before[at]), { timeout: 10_000 }).toBe(true)
  await expect.poll(() => request.get('/api/health').then(answer => answer.status(), () => 0), { timeout: 20_000 }).toBe(200)
})
