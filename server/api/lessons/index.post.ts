import { makeLesson } from '#server/services/lessons/make-lesson'
import { defineRoute } from '#server/utils/define-route'
import { lessonInput } from '#shared/contract/lessons'

export default defineRoute({
  access: ['instructor'],
  summary: 'A lesson to be written: numbered after the last, at an address made of its title, read by nobody until it is published.',
  body: lessonInput,
  status: 201,
  keeps: true,
}, async ({ em, actor, body }) => makeLesson(em, actor, body))
