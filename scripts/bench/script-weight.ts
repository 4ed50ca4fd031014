import { get } from 'node:http'
import { setTimeout as wait } from 'node:timers/promises'
import { chromium, type Browser } from '@playwright/test'
import { basePath, type PageToVisit } from './pages-to-visit'

export interface ScriptWeight { page: Pick<PageToVisit, 'who' | 'name'>, files: number, bytes: number }

const quietMs = 1500
const longestMs = 20_000

/**
 * The script each page brings on a first visit, until nothing more was asked for in a while: what runs, what is loaded ahead, what is
 * loaded when idle. Counted in bytes as sent to a browser that takes gzip.
 */
export async function scriptWeights(url: string, pages: readonly PageToVisit[]): Promise<ScriptWeight[]> {
  const sizes = new Map<string, number>()
  const weigh = async (script: string) => sizes.get(script) ?? sizes.set(script, await bytesSent(script)).get(script) ?? 0
  const browser = await chromium.launch({ executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--no-first-run', '--disable-background-networking'] })
  try {
    const weights: ScriptWeight[] = []
    const visits = [{ who: 'student' as const, name: '/login', path: '/login', cookie: '' }, ...pages.slice(0, 1).map(page => ({ ...page, name: basePath, path: basePath, cookie: page.visitor.cookie })), ...pages.map(page => ({ ...page, cookie: page.visitor.cookie }))]
    for (const { who, name, path, cookie } of visits) {
      const scripts = await scriptsOf(browser, url, path, cookie)
      const bytes = await Promise.all(scripts.map(weigh))
      weights.push({ page: { who, name }, files: scripts.length, bytes: bytes.reduce((sum, one) => sum + one, 0) })
    }
    return weights
  }
  finally {
    await browser.close()
  }
}

/** Addresses of the scripts a browser with nothing kept asks for. */
async function scriptsOf(browser: Browser, url: string, path: string, cookie: string): Promise<string[]> {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, locale: 'en-GB' })
  try {
    const scripts = new Set<string>()
    let last = performance.now()
    context.on('request', (request) => {
      last = performance.now()
      // A script loaded ahead is no script yet to the browser: its name says what it is.
      if (request.resourceType() === 'script' || new URL(request.url()).pathname.endsWith('.js')) scripts.add(request.url())
    })
    await context.addCookies(cookie.split('; ').filter(Boolean).map((pair) => {
      const at = pair.indexOf('=')
      return { name: pair.slice(0, at), value: pair.slice(at + 1), url }
    }))
    const page = await context.newPage()
    await page.goto(`${url}${path}`, { waitUntil: 'load' })
    // Not by the browser's own idle: an open stream of events would never let it come.
    const end = performance.now() + longestMs
    while (performance.now() - last < quietMs && performance.now() < end) await wait(100)
    return [...scripts]
  }
  finally {
    await context.close()
  }
}

function bytesSent(address: string): Promise<number> {
  return new Promise((resolve, reject) => {
    get(address, { headers: { 'accept-encoding': 'gzip' } }, (answer) => {
      let bytes = 0
      answer.on('data', (piece: Buffer) => bytes += piece.length)
      answer.on('end', () => answer.statusCode === 200 ? resolve(bytes) : reject(new Error(`${address} answered ${answer.statusCode}`)))
      answer.on('error', reject)
    }).on('error', reject)
  })
}
