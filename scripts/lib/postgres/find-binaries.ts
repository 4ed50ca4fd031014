import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { delimiter, join } from 'node:path'

/**
 * The folder with initdb and postgres in it, or null.
 *
 * Debian puts only psql on PATH; the server's programs are under /usr/lib/postgresql/<version>/bin.
 *
 * @param clusterDir when a cluster is there already, only the version that made it can open it
 */
export function findPostgresBinaries(clusterDir: string, env: NodeJS.ProcessEnv = process.env): string | null {
  const versionFile = join(clusterDir, 'PG_VERSION')
  const madeBy = existsSync(versionFile) ? readFileSync(versionFile, 'utf8').trim() : null
  const base = '/usr/lib/postgresql'
  const versions = existsSync(base) ? readdirSync(base).filter(name => /^\d+$/.test(name)).sort((a, b) => Number(b) - Number(a)) : []
  const debian = versions.filter(version => madeBy === null || version === madeBy).map(version => join(base, version, 'bin'))
  const candidates = [env.POSTGRES_BIN ?? '', ...debian, ...(madeBy === null ? (env.PATH ?? '').split(delimiter) : [])]
  return candidates.find(dir => dir !== '' && existsSync(join(dir, 'initdb')) && existsSync(join(dir, 'postgres'))) ?? null
}
