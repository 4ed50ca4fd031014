import { Node } from '@tiptap/core'

/** One stroke of the steps; `cannotBeUndone` says that the metal does not come back. */
export const StepBlock = Node.create({
  name: 'step',
  content: 'block+',
  defining: true,
  addAttributes: () => ({
    cannotBeUndone: {
      default: false,
      parseHTML: (element: HTMLElement) => element.hasAttribute('data-cannot-be-undone'),
      renderHTML: (attributes: Record<string, unknown>) => attributes.cannotBeUndone ? { 'data-cannot-be-undone': '' } : {},
    },
  }),
  parseHTML: () => [{ tag: 'li[data-block="step"]', priority: 60 }],
  renderHTML: ({ HTMLAttributes }) => ['li', { 'data-block': 'step', ...HTMLAttributes }, 0],
})
