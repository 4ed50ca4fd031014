import { sealAudit } from '../services/audit/seal-audit'
import { forgetAnswers } from '../services/jobs/forget-answers'
import { deliverMail } from '../services/mail/deliver-mail'
import { hashMedia } from '../services/media/hash-media'
import { applyPayment } from '../services/money/apply-payment'
import { makeReceipt } from '../services/money/make-receipt'
import { sendRefund } from '../services/money/send-refund'
import { sweepPayments } from '../services/money/sweep-payments'
import { preparePhoto } from '../services/photos/prepare-photo'
import { passOffers } from '../services/places/pass-offers'
import { sendReminders } from '../services/reminders/send-reminders'
import { scoreSubmission } from '../services/submissions/score-submission'
import { clearUploads } from '../services/uploads/clear-uploads'
import type { App } from '../utils/app'
import type { JobData, QueueName } from '../utils/queues'

/** One handler a kind of work. Each may run twice without a second effect. */
export const handlers: { [Name in QueueName]: (app: App, data: JobData[Name]) => Promise<void> } = {
  'score-submission': (app, { submissionId }) => scoreSubmission(app, submissionId),
  'prepare-photo': (app, { photoId }) => preparePhoto(app, photoId),
  'hash-media': (app, { mediaId }) => hashMedia(app, mediaId),
  'apply-payment': (app, { paymentId }) => applyPayment(app, paymentId),
  'sweep-payments': app => sweepPayments(app),
  'send-refund': (app, { refundId }) => sendRefund(app, refundId),
  'pass-offers': (app, { cohortId }) => passOffers(app, cohortId),
  'make-receipt': (app, { receiptId }) => makeReceipt(app, receiptId),
  'send-mail': (app, { mailId }) => deliverMail(app, mailId),
  'seal-audit': async (app, { reason }) => void await sealAudit(app.orm.em.fork(), reason),
  'send-reminders': async app => void await sendReminders(app, app.clock.schoolNow()),
  'forget-answers': async app => void await forgetAnswers(app.orm.em.fork(), app.clock.now()),
  'clear-uploads': async app => void await clearUploads(app),
}
