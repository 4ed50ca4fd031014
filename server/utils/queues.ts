/**
 * Every kind of work that happens later, with how often and how patiently it is tried again.
 * `expireInSeconds` is well above each handler's own time: a job that outlives it would run twice at once.
 */
export const queues = {
  'score-submission': { policy: 'standard', retryLimit: 8, retryDelay: 1, retryBackoff: true, expireInSeconds: 8 },
  'prepare-photo': { policy: 'standard', retryLimit: 6, retryDelay: 2, retryBackoff: true, expireInSeconds: 120 },
  'hash-media': { policy: 'standard', retryLimit: 6, retryDelay: 10, retryBackoff: true, expireInSeconds: 1800 },
  'apply-payment': { policy: 'standard', retryLimit: 12, retryDelay: 2, retryBackoff: true, expireInSeconds: 120 },
  'sweep-payments': { policy: 'short', retryLimit: 3, retryDelay: 20, retryBackoff: true, expireInSeconds: 300 },
  'send-refund': { policy: 'standard', retryLimit: 20, retryDelay: 5, retryBackoff: true, expireInSeconds: 120 },
  'make-receipt': { policy: 'standard', retryLimit: 12, retryDelay: 5, retryBackoff: true, expireInSeconds: 60 },
  'pass-offers': { policy: 'standard', retryLimit: 5, retryDelay: 5, retryBackoff: true, expireInSeconds: 120 },
  'send-mail': { policy: 'standard', retryLimit: 12, retryDelay: 5, retryBackoff: true, expireInSeconds: 60 },
  'seal-audit': { policy: 'short', retryLimit: 3, retryDelay: 5, retryBackoff: true, expireInSeconds: 60 },
  'send-reminders': { policy: 'short', retryLimit: 5, retryDelay: 60, retryBackoff: true, expireInSeconds: 600 },
  'forget-answers': { policy: 'short', retryLimit: 3, retryDelay: 60, retryBackoff: true, expireInSeconds: 600 },
  'clear-uploads': { policy: 'short', retryLimit: 3, retryDelay: 60, retryBackoff: true, expireInSeconds: 600 },
} as const

export type QueueName = keyof typeof queues

/** What each kind of job carries: ids only; the handler reads the rest fresh. */
export interface JobData {
  'score-submission': { submissionId: string }
  'prepare-photo': { photoId: string }
  'hash-media': { mediaId: string }
  'apply-payment': { paymentId: string }
  'sweep-payments': Record<string, never>
  'send-refund': { refundId: string }
  'make-receipt': { receiptId: string }
  /** Null: every cohort. */
  'pass-offers': { cohortId: string | null }
  'send-mail': { mailId: string }
  'seal-audit': { reason: string }
  'send-reminders': Record<string, never>
  'forget-answers': Record<string, never>
  'clear-uploads': Record<string, never>
}
