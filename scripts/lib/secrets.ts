import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { Problem } from './problem'

const names = ['authSecret', 'databasePassword', 'databaseAdminPassword', 'storageAccessKey', 'storageSecretKey', 'payKey', 'payWebhookSecret'] as const

export type Secrets = Record<typeof names[number], string>

/**
 * The secrets of this machine's own services, made once and kept in `secrets.json` for its owner alone.
 *
 * @throws {Problem} when the file is there and cannot be understood; a new one would lock us out of the database
 */
export function readOrMakeSecrets(dataDir: string): Secrets {
  mkdirSync(dataDir, { recursive: true })
  const file = join(dataDir, 'secrets.json')
  let kept: Partial<Secrets> = {}
  if (existsSync(file)) {
    try {
      kept = JSON.parse(readFileSync(file, 'utf8')) as Partial<Secrets>
    }
    catch {
      throw new Problem(`${file} is not readable JSON. Put it back from a copy, or remove the whole folder ${dataDir} to begin again.`)
    }
  }
  const missing = names.filter(name => typeof kept[name] !== 'string')
  if (missing.length > 0) {
    for (const name of missing) kept[name] = randomBytes(name === 'storageAccessKey' ? 10 : 32).toString('hex')
    // Beside and then renamed, so that a kill here leaves the old file or the new one, never half.
    writeFileSync(`${file}.new`, JSON.stringify(kept, null, 2) + '\n', { mode: 0o600 })
    renameSync(`${file}.new`, file)
  }
  return kept as Secrets
}
