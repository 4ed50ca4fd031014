import type { ConsentState } from '#shared/contract/safety'

/** How somebody stands with the safety form, in the office's words. */
export const consentWords: Readonly<Record<ConsentState, string>> = { 'signed': 'signed', 'asked again': 'to sign again', 'none': 'not signed' }
