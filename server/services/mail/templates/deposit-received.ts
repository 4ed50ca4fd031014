import type { Letter } from '../letter'

export interface DepositReceived {
  first: string
  cohort: string
  amount: string
  receivedOn: string
  /** Null when nothing more is to pay. */
  due: { amount: string, by: string } | null
  /** Last day on which all of it comes back; null when there is none. */
  freeUntil: string | null
  formUrl: string
}

/** Message 2: deposit received. */
export function depositReceived({ first, cohort, amount, receivedOn, due, freeUntil, formUrl }: DepositReceived): Letter {
  return {
    subject: `Your place in ${cohort} is booked`,
    paragraphs: [
      { text: `Thank you, ${first}. ${amount} received ${receivedOn}; receipt attached.` },
      { text: [due ? `Balance ${due.amount} by ${due.by}.` : 'Nothing more is to pay.', freeUntil ? `Until ${freeUntil} you may cancel for a full refund.` : ''].filter(Boolean).join(' ') },
      { text: 'Next: safety form and boot size, ten minutes. If you have no account yet, the invitation comes by a message of its own.' },
    ],
    action: { label: 'Fill in the safety form', url: formUrl },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
