import { Node } from '@tiptap/core'
import { dataAttribute } from './data-attribute'

const seconds = (text: string): number | null => Number.isFinite(Number.parseFloat(text)) ? Number.parseFloat(text) : null

/** A film, or a part of one: from `start` to `end`, seconds; null plays to its own end. */
export const ClipBlock = Node.create({
  name: 'clip',
  group: 'block',
  atom: true,
  draggable: true,
  addAttributes: () => ({ asset: dataAttribute('asset', null), start: dataAttribute('start', 0, text => seconds(text) ?? 0), end: dataAttribute('end', null, seconds), caption: dataAttribute('caption', '') }),
  parseHTML: () => [{ tag: 'div[data-block="clip"]' }],
  renderHTML: ({ HTMLAttributes }) => ['div', { 'data-block': 'clip', ...HTMLAttributes }],
})
