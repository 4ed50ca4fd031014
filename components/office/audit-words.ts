/** What happened, in plain words; an action not named here shows its code with the dashes taken out. */
const words: Readonly<Record<string, string>> = {
  'signed-in': 'signed in',
  'sessions-ended': 'sign-ins ended',
  'person-invited': 'invited',
  'person-renamed': 'name corrected',
  'roles-changed': 'roles changed',
  'password-set': 'password set',
  'password-link-sent': 'password link sent',
  'place-asked': 'place asked for',
  'place-offered': 'place offered',
  'head-stopped': 'head stopped',
  'stop-lifted': 'stop lifted',
  'submission.start': 'proof begun',
  'submission.ask': 'release asked',
  'point.shut-again': 'point shut again',
  'rubric-saved': 'rubric saved',
}

export function actionWords(action: string): string {
  return words[action] ?? action.replaceAll(/[-.]/g, ' ')
}

/** "roles: student, admin; again: yes" of an event's detail, which is JSON; ids and hashes are left out, the record has them. */
export function detailWords(detail: string): string {
  const given: unknown = JSON.parse(detail)
  if (typeof given !== 'object' || given === null) return ''
  return Object.entries(given)
    .map(([name, value]) => [name.replaceAll(/([A-Z])/g, ' $1').toLowerCase(), valueWords(value)] as const)
    .filter(([, value]) => value !== '')
    .map(([name, value]) => `${name}: ${value}`)
    .join('; ')
}

function valueWords(value: unknown): string {
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (typeof value === 'number') return String(value)
  if (typeof value === 'string') return /^([0-9a-f]{8}-[0-9a-f-]{27}|[0-9a-f]{32,})$/.test(value) ? '' : value
  if (Array.isArray(value)) return value.map(valueWords).filter(Boolean).join(', ')
  return ''
}
