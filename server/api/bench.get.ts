import { viewBench } from '#server/services/bench/view-bench'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student'],
  summary: 'My bench: the caution, the next allowed stroke, what may still be taken, what is wanted and what is waited for.',
}, ({ em, app, actor }) => viewBench(em, app, actor))
