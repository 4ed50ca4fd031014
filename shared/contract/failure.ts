/** What went wrong with a call, in a form a screen can show: always a sentence, and a code to act on. */
export interface Failure {
  code: string
  sentence: string
  status: number
  issues: { path: string, message: string }[]
  /** Whatever else the problem details carried (`refused`, `changed`, `retryAfter`). */
  extra: Record<string, unknown>
}

interface Thrown { statusCode?: number, status?: number, data?: unknown, response?: { status?: number, _data?: unknown } }

/** A thrown fetch error as a failure. No answer at all is `offline`: what was typed is kept and can be sent again. */
export function toFailure(thrown: unknown): Failure {
  const error = (thrown ?? {}) as Thrown
  const status = error.statusCode ?? error.status ?? error.response?.status ?? 0
  const body = (error.data ?? error.response?._data ?? {}) as { code?: string, title?: string, issues?: Failure['issues'] } & Record<string, unknown>
  if (!status) return { code: 'offline', sentence: 'The school’s server cannot be reached. What you have is kept here and goes up when it can.', status: 0, issues: [], extra: {} }
  return {
    code: typeof body.code === 'string' ? body.code : 'fault',
    sentence: typeof body.title === 'string' ? body.title : 'Something broke on our side. Nothing you sent was lost; try again in a moment.',
    status,
    issues: Array.isArray(body.issues) ? body.issues : [],
    extra: body,
  }
}
