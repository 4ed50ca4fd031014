import { createHash, randomBytes } from 'node:crypto'
import pg from 'pg'
import type { BenchView, SubmissionView } from '#shared/contract/views'
import { s3Storage } from '../../server/adapters/storage/s3'
import { read } from './calls'
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

test('scores once what the worker was killed over, and the page shows it', async ({ page, school }) => {
  await signIn(page, 'osric')
  const id = (await read<BenchView>(page, '/api/bench')).next?.submission?.id
  await page.goto(`/proof/${id}`)
  await ready(page)
  const database = new pg.Client({ connectionString: school.databaseUrl })
  await database.connect()
  try {
    // With this lock a worker that has judged the proof cannot write what it found: it is killed in the middle, not before or after.
    await database.query('begin; lock table score_set in share mode')
    await page.getByRole('button', { name: /^Ask for/ }).click()
    const job = async () => (await database.query<{ state: string }>('select state::text from pgboss.job where name = \'score-submission\' and data ->> \'submissionId\' = $1', [id])).rows[0]?.state
    const stuck = async () => (await database.query<{ n: number }>('select count(*)::int as n from pg_locks where relation = \'score_set\'::regclass and not granted')).rows[0]?.n
    await expect.poll(job).toBe('active')
    await expect.poll(stuck).toBe(1)
    await expect(page.getByText('Being scored. This page follows by itself.')).toBeVisible()
    const pid = school.stack.worker.mark()?.pid ?? 0
    process.kill(pid, 'SIGKILL')
    await database.query('rollback')
    await expect(page.locator('[data-criterion]').first()).toBeVisible({ timeout: 20_000 })
    expect((await read<SubmissionView>(page, `/api/submissions/${id}`)).state).toBe('scored')
    expect((await database.query<{ n: number }>('select count(*)::int as n from score_set where submission_id = $1', [id])).rows).toEqual([{ n: 1 }])
  }
  finally {
    await database.end()
  }
})
