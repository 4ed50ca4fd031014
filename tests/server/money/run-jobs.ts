import { handlers } from '#server/jobs/handlers'
import type { App } from '#server/utils/app'
import type { JobData, QueueName } from '#server/utils/queues'

/** Does what waits in these queues, and what follows from it, as the worker would; a job that throws stays and the throw is the caller's. */
export async function runJobs(app: App, ...names: QueueName[]): Promise<void> {
  const list = names.map(() => '?').join(', ')
  for (;;) {
    const [job] = await app.orm.em.fork().getConnection().execute<{ id: string, name: QueueName, data: JobData[QueueName] }[]>(`select id, name, data from pgboss.job where state = 'created' and name in (${list}) order by created_on limit 1`, names)
    if (!job) return
    await (handlers[job.name] as (app: App, data: unknown) => Promise<void>)(app, job.data)
    await app.orm.em.fork().getConnection().execute('delete from pgboss.job where id = ?', [job.id])
  }
}
