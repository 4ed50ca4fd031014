import { defineRoute } from '#server/utils/define-route'
import { computables } from '#shared/domain/rubric/compute/compute'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Every quantity that can be computed by hand, with its inputs, units and source.',
}, async () => ({ items: computables.map(({ name, title, inputs, unit, source }) => ({ name, title, inputs, unit, source })) }))
