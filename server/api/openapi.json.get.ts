import { definePublicRoute } from '#server/utils/define-public-route'
import description from '../openapi.json'

export default definePublicRoute({
  why: 'Programs read it before they sign in; it says nothing of the school.',
  summary: 'This description of every route.',
}, async () => description)
