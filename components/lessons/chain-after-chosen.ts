import { NodeSelection } from '@tiptap/pm/state'
import type { Editor } from '@tiptap/vue-3'

/** Begins a change at the cursor. Where a whole block is chosen, a new line after it: what is put in never takes the block's place. */
export function chainAfterChosen(editor: Editor) {
  const { selection } = editor.state
  const chain = editor.chain().focus()
  return selection instanceof NodeSelection ? chain.insertContentAt(selection.to, { type: 'paragraph' }).setTextSelection(selection.to + 1) : chain
}
