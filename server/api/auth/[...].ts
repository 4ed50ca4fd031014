import { defineEventHandler } from 'h3'
import { handleAuth } from '#server/utils/handle-auth'

export default Object.assign(defineEventHandler(event => handleAuth(event)), {
  route: { public: true as const, access: [], summary: 'Sign in and out, session and CSRF token (Auth.js).', why: 'Nobody is signed in before signing in.' },
})
