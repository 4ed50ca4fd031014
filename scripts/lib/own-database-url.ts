import { ownCluster } from './own-cluster'
import { databaseUrl } from './postgres/ensure-database'
import { readOrMakeSecrets } from './secrets'
import { readSettings } from './settings'

/** Address of the school's database: the one the environment gives, or that of this copy's own cluster. Starts nothing. */
export function ownDatabaseUrl(): string {
  const settings = readSettings(process.env)
  if (settings.given.databaseUrl) return settings.given.databaseUrl
  const secrets = readOrMakeSecrets(settings.dataDir)
  return databaseUrl(ownCluster(settings.dataDir, settings.databasePort, secrets), { name: 'witness', password: secrets.databasePassword }, 'witness_mark')
}
