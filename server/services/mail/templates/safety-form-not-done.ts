import { listInWords } from '#shared/domain/rubric/words'
import type { Letter } from '../letter'

const numbers = ['No', 'One', 'Two', 'Three', 'Four']

/** Message 3: the safety form is not done. `items` are what it still needs, at least one. */
export function safetyFormNotDone({ first, items, url }: { first: string, items: string[], url: string }): Letter {
  return {
    subject: `${numbers[items.length] ?? items.length} ${items.length === 1 ? 'box' : 'boxes'} left before you may use a tool`,
    paragraphs: [{ text: `${first}, your form still needs ${listInWords(items)}. Without it you can watch but not cut.` }],
    action: { label: 'Fill in the form', url },
    from: 'Sallowbeck School of Head Work',
  }
}
