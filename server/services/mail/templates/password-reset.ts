import type { Letter } from '../letter'

/** A link to set a new password. */
export function passwordReset({ first, url }: { first: string, url: string }): Letter {
  return {
    subject: 'Choose a new password',
    paragraphs: [
      { text: `Hello ${first}, somebody asked for a new password for this e-mail. The link works once and for one hour.` },
      { text: 'If it was not you, do nothing: your password stays as it is.' },
    ],
    action: { label: 'Choose a new password', url },
    from: 'Sallowbeck School of Head Work',
  }
}
