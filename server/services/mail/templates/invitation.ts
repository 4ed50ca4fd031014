import type { Letter } from '../letter'

/** The first link a person gets. */
export function invitation({ first, by, url }: { first: string, by: string, url: string }): Letter {
  return {
    subject: 'Your sign-in for Sallowbeck',
    paragraphs: [
      { text: `Hello ${first}, ${by} made an account for you. Choose a password and you are in. The link works once and for seven days.` },
    ],
    action: { label: 'Choose a password', url },
    from: 'Sallowbeck School of Head Work',
  }
}
