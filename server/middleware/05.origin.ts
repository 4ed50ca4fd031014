import { defineEventHandler, getRequestHeader } from 'h3'
import { answerProblem } from '#server/utils/answer-problem'
import { Refusal } from '#server/utils/refusal'

/**
 * Refuses a browser's unsafe request that another site made. With neither header the caller is no browser and is served.
 * Auth.js guards its own routes with a double-submit token as well.
 */
export default defineEventHandler((event) => {
  if (!event.path.startsWith('/api/') || ['GET', 'HEAD', 'OPTIONS'].includes(event.method)) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  const origin = getRequestHeader(event, 'origin')
  const ours = new URL(process.env.AUTH_ORIGIN ?? 'http://127.0.0.1:3000').origin
  if (site !== undefined && site !== 'same-origin' && site !== 'none') return answerProblem(event, new Refusal('foreign_origin'))
  if (origin !== undefined && origin !== ours) return answerProblem(event, new Refusal('foreign_origin'))
})
