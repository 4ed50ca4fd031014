import { ownDatabaseUrl } from '../lib/own-database-url'
import { readOrMakeSecrets } from '../lib/secrets'
import { readSettings } from '../lib/settings'
import { applicationEnv } from '../lib/start-stack'

/** What the seed reads: the caller's environment, and for a person who says `npm run seed` beside a running `npm start`, that copy's own. */
export function seedEnv(env: NodeJS.ProcessEnv): NodeJS.ProcessEnv {
  const settings = readSettings(env)
  return applicationEnv({ ...settings, secrets: readOrMakeSecrets(settings.dataDir), databaseUrl: env.NUXT_DATABASE_URL || ownDatabaseUrl(), env, say: () => undefined }) as NodeJS.ProcessEnv
}
