/** Templates as the office calls them; one that is not named here shows as it is. */
const names: Readonly<Record<string, string>> = {
  'invitation': 'Invitation',
  'password-reset': 'New password',
  'place-asked': 'Open to hold the place',
  'place-held': 'Place held',
  'deposit-received': 'Deposit received',
  'balance-received': 'Balance received',
  'safety-form-not-done': 'Safety form not done',
  'balance-due': 'Balance due',
  'balance-late': 'Balance late',
  'waiting-list-offer': 'Waiting list offer',
  'welcome': 'Welcome',
  'evidence-sent-back': 'Evidence sent back',
  'hold-released': 'Hold released',
  'stopped': 'Stop',
  'stop-work': 'Stop-work',
  'refund': 'Refund',
  'results': 'Results',
  'alumni-ending': 'Access ending',
  'lesson-changed': 'Lesson changed',
}

export function templateName(template: string): string {
  return names[template] ?? template.replaceAll('-', ' ')
}
/** What became of a message, in plain words. */
export const mailStates = { waiting: 'on its way', sent: 'sent', dead: 'could not be delivered' } as const
