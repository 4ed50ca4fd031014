import { Node } from '@tiptap/core'
import { dataAttribute } from './data-attribute'

/** A picture with what it shows in words: one of the school's uploads (`asset`, its id) or a drawing of ours (`drawing`, its name in public/drawings). */
export const FigureBlock = Node.create({
  name: 'figure',
  group: 'block',
  atom: true,
  draggable: true,
  addAttributes: () => ({ asset: dataAttribute('asset', null), drawing: dataAttribute('drawing', null), alt: dataAttribute('alt', ''), caption: dataAttribute('caption', '') }),
  parseHTML: () => [{ tag: 'div[data-block="figure"]' }],
  renderHTML: ({ HTMLAttributes }) => ['div', { 'data-block': 'figure', ...HTMLAttributes }],
})
