import { chmodSync, chownSync, existsSync, lstatSync, mkdirSync, realpathSync, renameSync, rmSync, symlinkSync, unlinkSync, writeFileSync } from 'node:fs'
import { createHash } from 'node:crypto'
import { dirname, join, resolve } from 'node:path'
import { Problem } from '../problem'
import { run } from '../run'
import type { Cluster } from './cluster'
import type { ServerUser } from './server-user'

const asUser = (user: ServerUser) => ({ ...(user ?? {}), cwd: '/' })

/** Whether the server's user can walk into that folder; a project under /root fails this. */
async function canReach(user: ServerUser, dir: string): Promise<boolean> {
  if (!user) return true
  return (await run('test', ['-x', dir], asUser(user))).code === 0
}

/**
 * Makes the cluster if it is not there, and answers with the real folder it lives in.
 *
 * initdb works in a folder beside the target, renamed at the end, so a kill in the middle leaves nothing half-made.
 *
 * @throws {Problem} when initdb fails
 */
export async function makeCluster(cluster: Cluster, binaries: string, user: ServerUser): Promise<string> {
  const asked = resolve(cluster.dir)
  if (existsSync(join(asked, 'PG_VERSION'))) return realpathSync(asked)
  mkdirSync(dirname(asked), { recursive: true })

  let home = asked
  if (!await canReach(user, dirname(asked))) {
    // The name is taken from the path, so that two copies of the project keep apart.
    home = join('/var/tmp', `witness-mark-${createHash('sha256').update(asked).digest('hex').slice(0, 12)}`)
    // What a removed copy of the project left there has no password any more.
    if (!isLinkTo(asked, home)) rmSync(home, { recursive: true, force: true })
  }

  if (!existsSync(join(home, 'PG_VERSION'))) {
    const half = `${home}.new`
    rmSync(half, { recursive: true, force: true })
    mkdirSync(half, { mode: 0o700 })
    const passwordFile = `${half}.password`
    rmSync(passwordFile, { force: true })
    writeFileSync(passwordFile, cluster.admin.password + '\n', { mode: 0o600 })
    if (user) for (const path of [half, passwordFile]) chownSync(path, user.uid, user.gid)
    chmodSync(half, 0o700)
    const ran = await run(join(binaries, 'initdb'), [
      '-D', half, '-U', cluster.admin.name, `--pwfile=${passwordFile}`,
      '--auth=scram-sha-256', '-E', 'UTF8', '--locale=C.UTF-8', '-k', ...(cluster.durable ? [] : ['--no-sync']),
    ], asUser(user))
    rmSync(passwordFile, { force: true })
    if (ran.code !== 0) {
      rmSync(half, { recursive: true, force: true })
      throw new Problem(`PostgreSQL could not make its data folder in ${dirname(home)}. It said:\n${ran.output.trim().split('\n').slice(-6).join('\n')}`)
    }
    // Also a link that points at nothing, which `exists` does not see.
    rmSync(home, { recursive: true, force: true })
    renameSync(half, home)
  }
  if (home !== asked && !isLinkTo(asked, home)) {
    rmSync(asked, { recursive: true, force: true })
    symlinkSync(home, asked)
  }
  return realpathSync(asked)
}

function isLinkTo(link: string, target: string): boolean {
  const found = lstatSync(link, { throwIfNoEntry: false })
  if (!found?.isSymbolicLink()) return false
  try {
    return realpathSync(link) === realpathSync(target)
  }
  catch {
    // The link points at nothing any more.
    unlinkSync(link)
    return false
  }
}
