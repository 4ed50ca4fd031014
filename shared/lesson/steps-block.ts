import { Node } from '@tiptap/core'

/** Numbered strokes. */
export const StepsBlock = Node.create({
  name: 'steps',
  group: 'block',
  content: 'step+',
  parseHTML: () => [{ tag: 'ol[data-block="steps"]', priority: 60 }],
  renderHTML: () => ['ol', { 'data-block': 'steps' }, 0],
})
