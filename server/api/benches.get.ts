import { benchProfiles } from '#server/services/school/bench-profiles'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'How each flow bench of the school writes its sheets.',
}, async () => benchProfiles)
