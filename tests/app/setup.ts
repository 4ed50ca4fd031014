import { registerEndpoint } from '@nuxt/test-utils/runtime'

// The sign-in module asks at start who is there; in a component's test nobody is, unless the test registers another answer.
registerEndpoint('/api/auth/session', () => ({}))
