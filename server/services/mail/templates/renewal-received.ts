import type { Letter } from '../letter'

export interface RenewalReceived { first: string, amount: string, receivedOn: string, until: string | null, shelfUrl: string }

/** A further year of the lessons was paid. */
export function renewalReceived({ first, amount, receivedOn, until, shelfUrl }: RenewalReceived): Letter {
  return {
    subject: until ? `The lessons stay open until ${until}` : 'The lessons stay open a year more',
    paragraphs: [{ text: `Thank you, ${first}. ${amount} received ${receivedOn}; receipt attached. Your own record stays for good, as it always does.` }],
    action: { label: 'Open your shelf', url: shelfUrl },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
