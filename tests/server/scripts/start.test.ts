import { cpSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { buildFingerprint } from '../../../scripts/lib/build-fingerprint'
import { endProcess } from '../../../scripts/lib/end-process'
import { isStillRunning, markOf, writeRunRecord } from '../../../scripts/lib/process-record'
import { refuseOutsideDemo } from '../../../scripts/lib/refuse-outside-demo'
import { run } from '../../../scripts/lib/run'
import { readOrMakeSecrets } from '../../../scripts/lib/secrets'
import { readSettings } from '../../../scripts/lib/settings'
import { supervise } from '../../../scripts/lib/supervise'
import { runRecordFile, takeThePlace } from '../../../scripts/lib/take-the-place'
import { waitUntil } from '../../../scripts/lib/wait-until'
import { withFileLock } from '../../../scripts/lib/with-file-lock'

let dir: string
beforeEach(() => {
  dir = mkdtempSync(join(tmpdir(), 'start-'))
})
afterEach(() => rmSync(dir, { recursive: true, force: true }))

describe('the demo school', () => {
  it.each([
    ['in production', { NODE_ENV: 'production' }, '127.0.0.1'],
    ['where others can reach it', {}, '0.0.0.0'],
    ['where its own address is not this machine', { AUTH_ORIGIN: 'https://school.example/api/auth' }, '127.0.0.1'],
    ['where a name only begins like this machine', { NUXT_PUBLIC_URL: 'http://127.0.0.1.school.example' }, '127.0.0.1'],
    ['under an address that is none', { AUTH_ORIGIN: '127.0.0.1:3000' }, '127.0.0.1'],
  ])('does not start %s', (_where, env, host) => {
    expect(() => refuseOutsideDemo(env, host)).toThrow(/node \.output\/server\/index\.mjs|should be an address/)
  })
  it('starts on this machine, by any of its names', () => {
    for (const host of ['127.0.0.1', 'localhost', '::1']) expect(() => refuseOutsideDemo({ NODE_ENV: 'development', AUTH_ORIGIN: 'http://localhost:3000/api/auth' }, host)).not.toThrow()
  })
})

describe('settings', () => {
  it('take every number from the environment', () => {
    expect(readSettings({ PORT: '3456', PGPORT: '5555', STORAGE_PORT: '9999', MAIL_PORT: '2222', MAIL_PAGE_PORT: '8888', PAY_PORT: '7777', TEST_PGPORT: '5556' })).toMatchObject({ webPort: 3456, databasePort: 5555, storagePort: 9999, mailPort: 2222, mailPagePort: 8888, payPort: 7777, testDatabasePort: 5556 })
  })
  it.each(['0', '65536', '30x', '-1', '3e3'])('refuse %s by name', (PORT) => {
    expect(() => readSettings({ PORT })).toThrow(/^PORT should be a number/)
  })
})

describe('secrets', () => {
  it('are made once, long, and for their owner alone', () => {
    const first = readOrMakeSecrets(dir)
    expect(readOrMakeSecrets(dir)).toEqual(first)
    expect(first.authSecret.length).toBeGreaterThanOrEqual(64)
    expect(new Set(Object.values(first)).size).toBe(7)
    expect(statSync(join(dir, 'secrets.json')).mode & 0o777).toBe(0o600)
  })
  it('are not replaced when they cannot be read', () => {
    writeFileSync(join(dir, 'secrets.json'), '{"authSecret": "a')
    expect(() => readOrMakeSecrets(dir)).toThrow(/Put it back/)
    expect(readFileSync(join(dir, 'secrets.json'), 'utf8')).toBe('{"authSecret": "a')
  })
})

describe('the build', () => {
  it('is stale when any source changes, moves or goes, and not for a test or a note', () => {
    mkdirSync(join(dir, 'server/api'), { recursive: true })
    mkdirSync(join(dir, 'tests'))
    writeFileSync(join(dir, 'server/api/a.ts'), 'one')
    const first = buildFingerprint(dir)
    writeFileSync(join(dir, 'tests/a.test.ts'), 'x')
    writeFileSync(join(dir, 'README.md'), 'x')
    expect(buildFingerprint(dir)).toBe(first)
    writeFileSync(join(dir, 'server/api/a.ts'), 'two')
    const second = buildFingerprint(dir)
    cpSync(join(dir, 'server/api/a.ts'), join(dir, 'server/api/b.ts'))
    rmSync(join(dir, 'server/api/a.ts'))
    expect(new Set([first, second, buildFingerprint(dir)]).size).toBe(3)
  })
})

describe('a process we keep', () => {
  const script = (body: string) => {
    const file = join(dir, 'child.mjs')
    writeFileSync(file, body)
    return [file]
  }

  it('is started again when it is killed, and ends when told', async () => {
    const one = supervise('child', script('setInterval(() => {}, 1000)'), process.env, () => {})
    const first = one.mark()
    if (!first) throw new Error('not started')
    process.kill(first.pid, 'SIGKILL')
    expect(await waitUntil(() => one.mark() !== null && one.mark()?.pid !== first.pid, 5000)).toBe(true)
    const second = one.mark()
    await one.stop()
    expect(second && isStillRunning(second)).toBe(false)
  })
  it('is given up when it ends five times in a minute, with what it said', async () => {
    const one = supervise('child', script('console.error("the configuration is not complete"); process.exit(1)'), process.env, () => {})
    expect(await waitUntil(() => one.hasGivenUp(), 15_000)).toBe(true)
    expect(one.tail()).toContain('the configuration is not complete')
  })
  it('is ended by force when it does not listen, and a stranger with its number is left alone', async () => {
    const one = supervise('child', script('process.on("SIGTERM", () => {}); console.log("up"); setInterval(() => {}, 1000)'), process.env, () => {})
    await waitUntil(() => one.tail().includes('up'), 5000)
    const mark = one.mark()
    if (!mark) throw new Error('not started')
    await endProcess({ ...mark, began: '1' }, 100)
    expect(isStillRunning(mark)).toBe(true)
    const stopped = one.stop()
    await endProcess(mark, 100)
    await stopped
    expect(isStillRunning(mark)).toBe(false)
  })
})

describe('the place of one start', () => {
  const settings = () => ({ ...readSettings({ PORT: '1' }), dataDir: dir })

  it('is refused to a second while the first runs', async () => {
    const parent = markOf(process.ppid)
    if (!parent) throw new Error('no parent')
    writeRunRecord(runRecordFile(dir), { starter: parent, url: 'http://127.0.0.1:3000', children: [] })
    await expect(takeThePlace(settings(), 'http://127.0.0.1:3000')).rejects.toThrow(/running already.*npm run stop/)
  })
  it('is taken over from a killed one, whose children are ended', async () => {
    const file = join(dir, 'child.mjs')
    writeFileSync(file, 'setInterval(() => {}, 1000)')
    const child = supervise('left', [file], process.env, () => {})
    const mark = child.mark()
    if (!mark) throw new Error('not started')
    writeRunRecord(runRecordFile(dir), { starter: { pid: mark.pid, began: '1' }, url: '', children: [mark] })
    const place = await takeThePlace(settings(), 'http://127.0.0.1:3000')
    expect(isStillRunning(mark)).toBe(false)
    await child.stop()
    place.leave()
    expect(existsSync(runRecordFile(dir))).toBe(false)
  })
})

describe('a file lock', () => {
  it('lets one in at a time', async () => {
    const order: string[] = []
    const work = (name: string) => withFileLock(join(dir, 'lock'), async () => {
      order.push(`${name} in`)
      await new Promise(resolve => setTimeout(resolve, 80))
      order.push(`${name} out`)
    })
    await Promise.all([work('a'), work('b')])
    expect([order[0]?.[0], order[2]?.[0]].sort()).toEqual(['a', 'b'])
    expect([order[0]?.slice(2), order[1]?.slice(2), order[2]?.slice(2)]).toEqual(['in', 'out', 'in'])
  })
  it('is taken over from a process that is gone', async () => {
    const { output } = await run(process.execPath, ['-e', 'console.log(process.pid)'])
    writeFileSync(join(dir, 'lock'), output.trim())
    expect(await withFileLock(join(dir, 'lock'), async () => 'in')).toBe('in')
  })
})

it('fails for a locked package that refuses Node 20, and names it', async () => {
  mkdirSync(join(dir, 'scripts'))
  cpSync('scripts/engines.mjs', join(dir, 'scripts/engines.mjs'))
  cpSync('node_modules/semver', join(dir, 'node_modules/semver'), { recursive: true })
  writeFileSync(join(dir, 'package.json'), '{"engines":{"node":">=20.19"}}')
  const lock = (node: string, more = {}) => writeFileSync(join(dir, 'package-lock.json'), JSON.stringify({ packages: { '': {}, 'node_modules/late': { version: '1.0.0', engines: { node }, ...more } } }))
  const check = () => run(process.execPath, [join(dir, 'scripts/engines.mjs')])
  lock('>=18')
  expect((await check()).code).toBe(0)
  lock('>=22')
  expect(await check()).toMatchObject({ code: 1, output: expect.stringContaining('node_modules/late') })
  lock('^18 || >=20.20')
  expect((await check()).code).toBe(1)
  lock('>=22', { optional: true })
  expect((await check()).code).toBe(0)
})
