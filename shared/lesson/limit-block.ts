import { Node } from '@tiptap/core'
import { dataAttribute } from './data-attribute'

/** A criterion of the rubric, shown with its band for the reader's casting. */
export const LimitBlock = Node.create({
  name: 'limit',
  group: 'block',
  atom: true,
  draggable: true,
  addAttributes: () => ({ criterion: dataAttribute('criterion', '') }),
  parseHTML: () => [{ tag: 'div[data-block="limit"]' }],
  renderHTML: ({ HTMLAttributes }) => ['div', { 'data-block': 'limit', ...HTMLAttributes }],
})
