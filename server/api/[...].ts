import { defineEventHandler, setResponseHeader } from 'h3'
import { answerProblem } from '#server/utils/answer-problem'
import { Refusal } from '#server/utils/refusal'
import description from '../openapi.json'
import { methodsOf } from '#server/utils/methods-of'

/** Whatever no other route takes: 405 where the address takes another method, else 404. */
export default defineEventHandler((event) => {
  const methods = methodsOf(description.paths, event.path)
  if (methods.length === 0) return answerProblem(event, new Refusal('not_found'))
  setResponseHeader(event, 'allow', methods.join(', '))
  return answerProblem(event, new Refusal('method_not_allowed'))
})
