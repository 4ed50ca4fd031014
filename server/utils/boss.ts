import PgBoss from 'pg-boss'
import { withDatabaseLock } from './database-lock'
import { queues, type QueueName } from './queues'

/** pg-boss, started, with every queue and its dead letter made. Handlers are attached by the worker alone. */
export async function startBoss(databaseUrl: string): Promise<PgBoss> {
  // A killed worker's scoring is taken up again within its 8 seconds of patience and one turn of maintenance.
  const boss = new PgBoss({ connectionString: databaseUrl, max: 4, maintenanceIntervalSeconds: 4, monitorStateIntervalSeconds: 30 })
  // Without a listener the process would end when the database stops for a moment.
  boss.on('error', fault => console.error('jobs:', fault.message))
  await withDatabaseLock(databaseUrl, async () => {
    await boss.start()
    await boss.createQueue('dead', { name: 'dead', policy: 'standard', retryLimit: 0 })
    for (const name of Object.keys(queues) as QueueName[]) {
      const options = { name, ...queues[name], deadLetter: 'dead' }
      await boss.createQueue(name, options)
      await boss.updateQueue(name, options)
    }
  })
  return boss
}
