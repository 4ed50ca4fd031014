import type { Letter } from '../letter'

export interface BalanceReceived { first: string, cohort: string, amount: string, receivedOn: string, due: { amount: string, by: string } | null, url: string }

/** The balance came, or a part of it. */
export function balanceReceived({ first, cohort, amount, receivedOn, due, url }: BalanceReceived): Letter {
  return {
    subject: due ? `${amount} received for your place in ${cohort}` : `Your place in ${cohort} is paid`,
    paragraphs: [
      { text: `Thank you, ${first}. ${amount} received ${receivedOn}; receipt attached.` },
      { text: due ? `Still to pay: ${due.amount} by ${due.by}.` : 'Nothing more is to pay.' },
    ],
    action: { label: 'See your place', url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
