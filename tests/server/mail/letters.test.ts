import { expect, it } from 'vitest'
import type { Letter } from '#server/services/mail/letter'
import { renderLetter } from '#server/services/mail/render-letter'
import { alumniEnding } from '#server/services/mail/templates/alumni-ending'
import { balanceDue } from '#server/services/mail/templates/balance-due'
import { balanceLate } from '#server/services/mail/templates/balance-late'
import { depositReceived } from '#server/services/mail/templates/deposit-received'
import { lessonChanged } from '#server/services/mail/templates/lesson-changed'
import { placeHeld } from '#server/services/mail/templates/place-held'
import { refundWentLetter } from '#server/services/mail/templates/refund'
import { results } from '#server/services/mail/templates/results'
import { safetyFormNotDone } from '#server/services/mail/templates/safety-form-not-done'
import { waitingListOffer } from '#server/services/mail/templates/waiting-list-offer'
import { welcome } from '#server/services/mail/templates/welcome'

const url = 'http://127.0.0.1:3000/place/x'
const money = (minor: number) => ({ minor, currency: 'GBP' })
// What a person types may look like a tag or a template; it goes out as typed.
const first = 'Agnes <b>'

// Subjects and bodies are the handbook's, 5.5, by its numbers.
const letters: [number, Letter, string, string[]][] = [
  [1, placeHeld({ first, cohort: 'Cinder', startsOn: '2026-09-21', until: '2026-03-28T19:40:00Z', deposit: money(35_000), url, rulesUrl: url }), 'A bench place is held for you until 19:40 on Saturday 28 March', ['a place in Cinder', 'the next person on the list', 'Corin reads these']],
  [2, depositReceived({ first, cohort: 'Cinder', amount: '£350.00', receivedOn: '26 March 2026', due: { amount: '£2,100.00', by: '24 August 2026' }, freeUntil: '9 April 2026', formUrl: url }), 'Your place in Cinder is booked', ['£350.00 received 26 March 2026; receipt attached', 'Until 9 April 2026 you may cancel for a full refund', 'safety form and boot size']],
  [3, safetyFormNotDone({ first, items: ['its ticks and your name under them', 'your boot size'], url }), 'Two boxes left before you may use a tool', ['your form still needs its ticks and your name under them and your boot size.', 'Without it you can watch but not cut.']],
  [4, balanceDue({ first, due: money(210_000), dueOn: '2026-08-24', inDays: 14, url }), 'Balance £2,100.00, due Monday 24 August 2026', ['this falls due in 14 days', 'I can usually do two parts']],
  [5, balanceLate({ first, due: money(210_000), daysLate: 1, heldUntil: '2026-08-30', url }), 'Balance now 1 day late', ['we have not had £2,100.00. Your place is held until Sunday 30 August 2026. After that we must offer it.']],
  [6, waitingListOffer({ first, cohort: 'Cinder', startsOn: '2026-09-21', until: '2026-03-28T19:40:00Z', url }), 'A place has come free', ['It is offered to you alone until', 'If you pass, you keep your turn.']],
  [7, welcome({ first, cohort: 'Alder', startsOn: '2026-02-10', pattern: 'Tue, Wed, Thu 18:00-21:30', core: 'DNK-0147', lesson: 1, url }), 'Tuesday: what to bring', ['Bring no gloves; staff lend them', 'Read lesson 1 (25 min). Your core is DNK-0147.']],
  [15, refundWentLetter({ first, cohort: 'Bramble', amount: '£325.00', cancelled: { on: '13 August 2025', daysBefore: 40 }, why: 'rule', rule: 'deposit back less £25.00', sum: '£350.00 - £25.00 = £325.00', by: 'card', url }), 'Your refund of £325.00', ['40 days before', 'Rule: deposit back less £25.00.', 'If you think the rule is wrong, reply; a person looks.']],
  [16, results({ first, head: 'DNK-0147', word: 'Sound', score: 91, gain: '16.8 ± 0.9 %', best: ['Bowl wall', 'Seat land', 'Throat'], workOn: { title: 'Finish', text: 'Chatter at the short turn.' }, url }), 'Your result: Sound', ['DNK-0147: Sound, 91 of 100. Lift-weighted intake 16.8 ± 0.9 %.', 'Three things you do well:', 'One to work on: Finish. Chatter at the short turn.', 'You keep the record for good.']],
  [17, alumniEnding({ first, until: '2028-12-18', price: money(4000), url }), 'Your access ends 18 December 2028', ['the lessons close on 18 December 2028; your own record never does. £40.00 keeps them open a year.']],
  [18, lessonChanged({ number: 5, title: 'Dummy valves', whatChanged: 'the margin is ground off first', why: 'two seats were bared', by: 'Hanne Brockwell', url }), 'Lesson 5 has changed', ['What: the margin is ground off first.', 'Why: two seats were bared.', 'your instructor will say']],
]

it.each(letters)('message %i has the handbook\'s subject and words, one action, and no brace or undefined left', async (_number, letter, subject, words) => {
  const { subject: line, html, text } = await renderLetter(letter)
  expect(line).toBe(subject)
  for (const one of words) expect(text).toContain(one)
  for (const one of [line, html, text]) expect(one).not.toMatch(/[{}]|undefined|null|NaN|\[object/)
  expect(html.match(/<a /g)).toHaveLength(1)
  expect(text.split(url).length - 1).toBeGreaterThanOrEqual(1)
  expect(html).not.toContain('<b>')
})

it('counts one box, and says today and tomorrow by name', () => {
  expect(safetyFormNotDone({ first, items: ['its ticks and your name under them'], url }).subject).toBe('One box left before you may use a tool')
  expect(balanceDue({ first, due: money(100), dueOn: '2026-08-24', inDays: 0, url }).paragraphs[0]?.text).toContain('falls due today.')
  expect(balanceDue({ first, due: money(100), dueOn: '2026-08-24', inDays: 1, url }).paragraphs[0]?.text).toContain('falls due tomorrow.')
  expect(balanceLate({ first, due: money(100), daysLate: 3, heldUntil: '2026-08-30', url }).subject).toBe('Balance now 3 days late')
})

it('leaves out of a result what there is none of', async () => {
  const { text } = await renderLetter(results({ first: 'Wen', head: 'DNK-0163', word: 'not yet', score: null, gain: null, best: [], workOn: null, url }))
  expect(text).toMatch(/^Wen, DNK-0163: not yet\.\n\nYou keep the record for good\.\n/)
})
