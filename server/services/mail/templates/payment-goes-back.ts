import type { Letter } from '../letter'

export interface PaymentGoesBack { first: string, cohort: string, amount: string, receivedOn: string, url: string }

/** Money came for which there was nothing to give: it is acknowledged, and goes back. Message 15 tells when it went. */
export function paymentGoesBack({ first, cohort, amount, receivedOn, url }: PaymentGoesBack): Letter {
  return {
    subject: `Your payment of ${amount} goes back to you`,
    paragraphs: [
      { text: `${first}, ${amount} came on ${receivedOn} for a place in ${cohort}, but there was no place it could pay for. All of it goes back to the card used; we write again when it has gone. A receipt of what came is attached.` },
    ],
    action: { label: 'See how your place stands', url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
