/**
 * `npm run ledger`: what the card processor took and gave back beside what the school wrote down, charge by charge, with the receipt of
 * each. Ends with 1 when any of it does not agree. Reads only; the school may be running or not, the processor must answer.
 */
import { MikroORM } from '@mikro-orm/postgresql'
import { AdapterRefusal } from '../server/adapters/adapter-refusal'
import { stripePayments } from '../server/adapters/payments/stripe'
import { dbConfig } from '../server/db/config'
import { compareLedger, printComparison } from './lib/compare-ledger'
import { ownDatabaseUrl } from './lib/own-database-url'
import { Problem } from './lib/problem'
import { runCommand } from './lib/run-command'
import { seedEnv } from './seed/seed-env'

await runCommand(async () => {
  const env = seedEnv(process.env)
  const payments = stripePayments({ key: env.NUXT_PAY_KEY ?? '', webhookSecret: env.NUXT_PAY_WEBHOOK_SECRET ?? '', endpoint: env.NUXT_PAY_ENDPOINT })
  const orm = await MikroORM.init({ ...dbConfig(ownDatabaseUrl()), connect: false })
  try {
    if (!(await orm.isConnected())) throw new Problem('The database does not answer. Start it with `npm start` or `npm run database`.')
    const rows = await compareLedger(orm, payments).catch((thrown: unknown) => {
      if (thrown instanceof AdapterRefusal) throw new Problem('The card processor does not answer. The stand-in runs with `npm start`; another is named by NUXT_PAY_ENDPOINT.')
      throw thrown
    })
    if (printComparison(rows, line => void process.stdout.write(`${line}\n`)) > 0) process.exitCode = 1
  }
  finally {
    await orm.close(true)
  }
})
