import type { App } from '#server/utils/app'

export interface Health { ok: boolean, database: boolean, storage: boolean, jobs: boolean }

/** Whether everything the school runs on answers within two seconds. */
export async function checkHealth(app: Pick<App, 'orm' | 'storage' | 'boss'>): Promise<Health> {
  const [database, storage, jobs] = await Promise.all([
    answers(async () => Boolean(await app.orm.em.fork().getConnection().execute('select 1'))),
    answers(() => app.storage.ready()),
    answers(async () => (await app.boss.getQueue('score-submission')) !== null),
  ])
  return { ok: database && storage && jobs, database, storage, jobs }
}

/** What fails or hangs does not answer; here that is an answer, not a fault. */
async function answers(question: () => Promise<boolean>): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined
  const tooLate = new Promise<boolean>((done) => {
    timer = setTimeout(() => done(false), 2000)
  })
  return Promise.race([question().catch(() => false), tooLate]).finally(() => clearTimeout(timer))
}
