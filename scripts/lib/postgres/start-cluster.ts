import { spawn } from 'node:child_process'
import { closeSync, openSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { installFromDebian } from '../install-from-debian'
import { isPortOpen } from '../is-port-open'
import { Problem } from '../problem'
import { waitUntil } from '../wait-until'
import { withFileLock } from '../with-file-lock'
import { clusterHost, type Cluster } from './cluster'
import { findPostgresBinaries } from './find-binaries'
import { makeCluster } from './make-cluster'
import { runningServer } from './running-server'
import { serverUser } from './server-user'
import { stopServer } from './stop-server'

/**
 * Brings the cluster up, from nothing if need be: installs PostgreSQL, makes the data folder, starts the server, waits until it answers.
 * One that is up already on the same port is left alone, so calling twice costs nothing.
 *
 * @returns the real data folder, for stopping it
 * @throws {Problem} when PostgreSQL cannot be had, its port is taken, or it does not come up
 */
export function startCluster(cluster: Cluster, say: (line: string) => void): Promise<string> {
  return withFileLock(`${cluster.dir}.lock`, () => bringUp(cluster, say))
}

async function bringUp(cluster: Cluster, say: (line: string) => void): Promise<string> {
  let binaries = findPostgresBinaries(cluster.dir)
  if (!binaries) {
    await installFromDebian('postgresql', 'PostgreSQL', say)
    binaries = findPostgresBinaries(cluster.dir)
    if (!binaries) throw new Problem(`No PostgreSQL here can open ${cluster.dir}. It was made by another version: install that version, or move the folder away.`)
  }
  const user = serverUser()
  const realDir = await makeCluster(cluster, binaries, user)

  const running = runningServer(realDir)
  if (running && running.port !== cluster.port) await stopServer(realDir)
  else if (running) {
    await untilReady(cluster, realDir, null)
    return realDir
  }
  // Only a stale one can be here now.
  rmSync(join(realDir, 'postmaster.pid'), { force: true })
  if (await isPortOpen(cluster.port, clusterHost)) {
    throw new Problem(`Something else answers on ${clusterHost}:${cluster.port}, where our PostgreSQL should. Stop it, or choose another with PGPORT=<number>.`)
  }

  // Shared memory of a killed server is held until its last child is gone: a moment later the start succeeds.
  for (let tries = 1; ; tries++) {
    const logFile = join(realDir, 'server.log')
    const log = openSync(logFile, 'w')
    const child = spawn(join(binaries, 'postgres'), ['-D', realDir, ...settings(cluster).flatMap(([name, value]) => ['-c', `${name}=${value}`])], {
      ...(user ?? {}), cwd: '/', detached: true, stdio: ['ignore', log, log], env: { PATH: process.env.PATH, LANG: 'C.UTF-8' },
    })
    closeSync(log)
    const ended = new Promise<void>(resolve => child.once('exit', () => resolve()))
    child.unref()
    if (await untilReady(cluster, realDir, ended)) return realDir
    const said = readFileSync(logFile, 'utf8')
    if (tries < 10 && /shared memory block|lock file/.test(said)) {
      await sleep(500)
      continue
    }
    throw new Problem(`PostgreSQL did not start. It said:\n${said.trim().split('\n').slice(-8).join('\n')}`)
  }
}

function settings(cluster: Cluster): [string, string][] {
  const always: [string, string][] = [
    ['port', String(cluster.port)], ['listen_addresses', clusterHost], ['unix_socket_directories', ''],
    ['timezone', 'UTC'], ['log_timezone', 'UTC'], ['max_connections', '200'],
  ]
  const careless: [string, string][] = [['fsync', 'off'], ['synchronous_commit', 'off'], ['full_page_writes', 'off'], ['autovacuum', 'off']]
  return cluster.durable ? always : [...always, ...careless]
}

/** False as soon as the server ends; throws when it neither ends nor answers in half a minute. */
async function untilReady(cluster: Cluster, realDir: string, ended: Promise<void> | null): Promise<boolean> {
  let gone = false
  void ended?.then(() => gone = true)
  const ready = await waitUntil(async () => gone || (runningServer(realDir)?.ready === true && await isPortOpen(cluster.port, clusterHost)), 30_000, 25)
  if (!ready) throw new Problem(`PostgreSQL did not answer on ${clusterHost}:${cluster.port} within 30 seconds. Its log is ${join(realDir, 'server.log')}.`)
  return !gone
}
