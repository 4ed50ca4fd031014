import { sealAudit } from '../services/audit/seal-audit'
import { deliverMail } from '../services/mail/deliver-mail'
import { hashMedia } from '../services/media/hash-media'
import { preparePhoto } from '../services/photos/prepare-photo'
import { scoreSubmission } from '../services/submissions/score-submission'
import { clearUploads } from '../services/uploads/clear-uploads'
import type { App } from '../utils/app'
import type { JobData, QueueName } from '../utils/queues'

/** One handler a kind of work. Each may run twice without a second effect. */
export const handlers: { [Name in QueueName]: (app: App, data: JobData[Name]) => Promise<void> } = {
  'score-submission': (app, { submissionId }) => scoreSubmission(app, submissionId),
  'prepare-photo': (app, { photoId }) => preparePhoto(app, photoId),
  'hash-media': (app, { mediaId }) => hashMedia(app, mediaId),
  'send-mail': (app, { mailId }) => deliverMail(app, mailId),
  'seal-audit': async (app, { reason }) => void await sealAudit(app.orm.em.fork(), reason),
  'clear-uploads': async app => void await clearUploads(app),
}
