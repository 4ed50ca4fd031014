import { test as base, expect, type BrowserContext, type Page } from '@playwright/test'
import { startSchool, type School } from './start-school'

type Options = {
  /** `test.use({ until: '2026-03-25T08:00:00Z' })` at the top of a file: where the story stands when its tests begin. */
  until: string | null
  /** A school of its own for this file, where another file stands at the same instant: one word of its own. */
  story: string
}
type Size = 'phone' | 'desktop'
type Fixtures = {
  /** Another person's browser, beside `page`: their own cookies and storage, watched in the same way. */
  another: (size: Size) => Promise<Page>
  /** What the browser may say on its console in this test; any other warning or error fails it. */
  consoleMaySay: RegExp | null
  quiet: { watch: (context: BrowserContext) => void }
}

const sizes = {
  phone: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true, deviceScaleFactor: 2 },
  desktop: { viewport: { width: 1320, height: 900 } },
}

/**
 * Playwright's `test`, with a school: `school.url`, its mail and storage, its processes.
 * A test also fails when the page complains on the console or asks anybody outside this machine.
 */
export const test = base.extend<Fixtures, Options & { school: School }>({
  until: [null, { option: true, scope: 'worker' }],
  story: ['', { option: true, scope: 'worker' }],
  school: [async ({ until, story: _other }, use, worker) => {
    const school = await startSchool(`${worker.project.name}_${worker.workerIndex}`, until)
    await use(school)
    await school.stop()
  }, { scope: 'worker', timeout: 180_000 }],
  baseURL: async ({ school }, use) => use(school.url),
  consoleMaySay: [null, { option: true }],
  quiet: [async ({ context, consoleMaySay }, use) => {
    const complaints: string[] = []
    const outside: string[] = []
    const watch = (watched: BrowserContext) => {
      watched.on('console', (message) => {
        if (['error', 'warning'].includes(message.type()) && !consoleMaySay?.test(message.text())) complaints.push(message.text())
      })
      watched.on('weberror', error => complaints.push(String(error.error())))
      watched.on('request', (request) => {
        const { protocol, hostname } = new URL(request.url())
        if (/^(https?|wss?):$/.test(protocol) && hostname !== '127.0.0.1') outside.push(request.url())
      })
    }
    watch(context)
    await use({ watch })
    expect(outside, 'requests to somebody outside this machine').toEqual([])
    expect(complaints, 'complaints on the browser\'s console').toEqual([])
  }, { auto: true }],
  another: async ({ browser, school, quiet }, use) => {
    const contexts: BrowserContext[] = []
    await use(async (size) => {
      const context = await browser.newContext({ ...sizes[size], baseURL: school.url, locale: 'en-GB' })
      contexts.push(context)
      quiet.watch(context)
      return context.newPage()
    })
    for (const context of contexts) await context.close()
  },
})

export { expect }
export type { School }

/** A page that has taken over from the server's HTML; a press before that may be lost. */
export async function ready(page: Page): Promise<void> {
  await page.waitForFunction(() => {
    const app = (window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }).useNuxtApp
    return app !== undefined && app().isHydrating === false
  })
}

/** Signs the page's browser in, by the calls the sign-in page makes. */
export async function signIn(page: Page, firstName: string): Promise<void> {
  const { csrfToken } = await (await page.request.get('/api/auth/csrf')).json() as { csrfToken: string }
  const answer = await page.request.post('/api/auth/callback/credentials', {
    form: { email: `${firstName.toLowerCase()}@sallowbeck.example`, password: 'slow-hands-true-numbers', csrfToken, json: 'true' },
  })
  const me = await page.request.get('/api/me')
  expect(me.status(), `sign-in of ${firstName} (${answer.status()})`).toBe(200)
}
