import type { App } from '../utils/app'
import type { JobData, QueueName } from '../utils/queues'

/** One handler a kind of work. Each may run twice without a second effect. */
export const handlers: { [Name in QueueName]: (app: App, data: JobData[Name]) => Promise<void> } = {
  'score-submission': async () => undefined,
  'prepare-photo': async () => undefined,
  'send-mail': async () => undefined,
  'seal-audit': async () => undefined,
  'clear-uploads': async () => undefined,
}
