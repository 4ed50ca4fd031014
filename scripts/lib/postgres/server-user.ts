import { readFileSync } from 'node:fs'
import { Problem } from '../problem'

export type ServerUser = { uid: number, gid: number } | null

/**
 * Who PostgreSQL runs as: ourselves (null), or Debian's `postgres` user when we are root, since the server refuses root.
 *
 * @throws {Problem} as root on a machine without such a user
 */
export function serverUser(): ServerUser {
  if (process.getuid?.() !== 0) return null
  const line = readFileSync('/etc/passwd', 'utf8').split('\n').find(entry => entry.startsWith('postgres:'))
  const [, , uid, gid] = line?.split(':') ?? []
  if (!uid || !gid) throw new Problem('PostgreSQL will not run as root, and there is no user called postgres on this machine. Install Debian\'s postgresql, or start as an ordinary user.')
  return { uid: Number(uid), gid: Number(gid) }
}
