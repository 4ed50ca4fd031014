import type { Job } from 'pg-boss'
import { resumeScoring } from '../services/submissions/resume-scoring'
import type { App } from '../utils/app'
import { queues, type JobData, type QueueName } from '../utils/queues'
import { handlers } from './handlers'

/** Attaches every handler. One job at a time a queue and process; each is completed or failed by its own id. */
export async function startWorker(app: App): Promise<void> {
  for (const name of Object.keys(queues) as QueueName[]) {
    const worker = await app.boss.work(name, { pollingIntervalSeconds: 0.5, batchSize: 1 }, async (jobs: Job<JobData[typeof name]>[]) => {
      for (const job of jobs) await (handlers[name] as (app: App, data: JobData[typeof name]) => Promise<void>)(app, job.data)
    })
    // Polling stays for what no signal tells: work put off, or put in while the listening connection was down.
    app.signals.onWork(name, () => app.boss.notifyWorker(worker))
  }
  await app.boss.schedule('seal-audit', '* * * * *', { reason: 'minute' })
  await app.boss.schedule('pass-offers', '* * * * *', { cohortId: null })
  await app.boss.schedule('send-reminders', '7 * * * *', {})
  await app.boss.schedule('sweep-payments', '*/3 * * * *', {})
  await app.boss.schedule('forget-answers', '47 3 * * *', {})
  await app.boss.schedule('clear-uploads', '17 3 * * *', {})
  // Not awaited: new work need not stand behind it.
  void resumeScoring(app).catch(fault => console.error('jobs: taking scoring up again:', fault))
}
