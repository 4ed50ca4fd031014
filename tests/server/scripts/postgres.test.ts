import { existsSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync, mkdirSync, chmodSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { afterEach, beforeEach, expect, it } from 'vitest'
import type { Cluster } from '../../../scripts/lib/postgres/cluster'
import { databaseUrl, ensureDatabase } from '../../../scripts/lib/postgres/ensure-database'
import { runningServer } from '../../../scripts/lib/postgres/running-server'
import { startCluster } from '../../../scripts/lib/postgres/start-cluster'
import { stopServer } from '../../../scripts/lib/postgres/stop-server'
import { waitUntil } from '../../../scripts/lib/wait-until'

let home: string
let cluster: Cluster
let realDir = ''
const owner = { name: 'witness', password: 'pass word/&', mayCreateDatabases: false }
const silent = () => {}

const freePort = () => new Promise<number>((resolve) => {
  const server = createServer().listen(0, '127.0.0.1', () => {
    const { port } = server.address() as AddressInfo
    server.close(() => resolve(port))
  })
})
async function ask(url: string, sql: string) {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    return (await client.query(sql)).rows as unknown[]
  }
  finally {
    await client.end()
  }
}
const pid = () => runningServer(realDir)?.pid ?? 0

beforeEach(async () => {
  home = mkdtempSync(join(tmpdir(), 'cluster-'))
  // mkdtemp makes a folder for its maker alone; a project folder can be walked through.
  chmodSync(home, 0o755)
  cluster = { dir: join(home, 'postgres'), port: await freePort(), admin: { name: 'boss', password: 'a secret' }, durable: false }
})
afterEach(async () => {
  if (realDir) await stopServer(realDir)
  if (realDir && realDir !== cluster.dir) rmSync(realDir, { recursive: true, force: true })
  rmSync(home, { recursive: true, force: true })
  realDir = ''
})

it('makes a cluster from nothing, lets in by password alone, and does nothing the second time', async () => {
  realDir = await startCluster(cluster, silent)
  const first = pid()
  const url = await ensureDatabase(cluster, owner, 'school')
  expect(await ask(url, 'show server_encoding')).toEqual([{ server_encoding: 'UTF8' }])
  await expect(ask(databaseUrl(cluster, { name: 'boss', password: 'guess' }, 'postgres'), 'select 1')).rejects.toMatchObject({ code: '28P01' })
  await ask(url, 'create table kept (n int)')
  expect(await startCluster(cluster, silent)).toBe(realDir)
  expect(await ensureDatabase(cluster, owner, 'school')).toBe(url)
  expect(pid()).toBe(first)
  expect(await ask(url, 'select count(*)::int as n from kept')).toEqual([{ n: 0 }])
})
it('comes back after a kill, with what was committed', async () => {
  realDir = await startCluster({ ...cluster, durable: true }, silent)
  const url = await ensureDatabase(cluster, owner, 'school')
  await ask(url, 'create table kept as select 7 as n')
  const killed = pid()
  process.kill(killed, 'SIGKILL')
  await waitUntil(() => !existsSync(`/proc/${killed}`), 5000)
  expect(existsSync(join(realDir, 'postmaster.pid'))).toBe(true)
  await startCluster({ ...cluster, durable: true }, silent)
  expect(await ask(url, 'select n from kept')).toEqual([{ n: 7 }])
})
it('is not fooled by a left pid that belongs to a living stranger', async () => {
  realDir = await startCluster(cluster, silent)
  await stopServer(realDir)
  writeFileSync(join(realDir, 'postmaster.pid'), `${process.pid}\n${realDir}\n1\n${cluster.port}\n\n127.0.0.1\n\nready\n`)
  expect(runningServer(realDir)).toBeNull()
  await startCluster(cluster, silent)
  expect(pid()).not.toBe(process.pid)
  expect(pid()).toBeGreaterThan(0)
})
it('begins again after it was killed while making the data folder', async () => {
  mkdirSync(`${cluster.dir}.new`)
  writeFileSync(join(`${cluster.dir}.new`, 'PG_VERSION'), '15\n')
  realDir = await startCluster(cluster, silent)
  expect(pid()).toBeGreaterThan(0)
  expect(existsSync(`${cluster.dir}.new`)).toBe(false)
})
it('moves to the number it is now given', async () => {
  realDir = await startCluster(cluster, silent)
  const moved = { ...cluster, port: await freePort() }
  await startCluster(moved, silent)
  expect(runningServer(realDir)?.port).toBe(moved.port)
})
it('says so when its number is taken', async () => {
  const server = createServer().listen(cluster.port, '127.0.0.1')
  await expect(startCluster(cluster, silent)).rejects.toThrow(/PGPORT=/)
  realDir = cluster.dir
  server.close()
})
it('says so when the kept password does not open it', async () => {
  realDir = await startCluster(cluster, silent)
  await expect(ensureDatabase({ ...cluster, admin: { name: 'boss', password: 'lost' } }, owner, 'school')).rejects.toThrow(/secrets\.json/)
})
it.runIf(process.getuid?.() === 0)('keeps its data elsewhere, and links it, where the server\'s user cannot walk', async () => {
  chmodSync(home, 0o700)
  realDir = await startCluster(cluster, silent)
  expect(realDir).toMatch(/^\/var\/tmp\//)
  expect(readFileSync(join(cluster.dir, 'PG_VERSION'), 'utf8').trim()).toMatch(/^\d+$/)
  await stopServer(realDir)
  expect(await startCluster(cluster, silent)).toBe(realDir)
})
it('makes a new one where the link points at nothing any more', async () => {
  symlinkSync(join(home, 'gone'), cluster.dir)
  realDir = await startCluster(cluster, silent)
  expect(pid()).toBeGreaterThan(0)
})
