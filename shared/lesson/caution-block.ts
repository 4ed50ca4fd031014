import { Node } from '@tiptap/core'

/** What can hurt a person or spoil a head, set apart from the text. */
export const CautionBlock = Node.create({
  name: 'caution',
  group: 'block',
  content: 'block+',
  defining: true,
  parseHTML: () => [{ tag: 'aside[data-block="caution"]' }],
  renderHTML: () => ['aside', { 'data-block': 'caution' }, 0],
})
