import type { Extensions } from '@tiptap/core'
import { VueNodeViewRenderer } from '@tiptap/vue-3'
import type { Component } from 'vue'
import { lessonExtensions } from '#shared/lesson/lesson-extensions'
import CautionView from './blocks/CautionView.vue'
import ClipView from './blocks/ClipView.vue'
import FigureView from './blocks/FigureView.vue'
import LimitView from './blocks/LimitView.vue'
import StepView from './blocks/StepView.vue'
import StepsView from './blocks/StepsView.vue'

const views: Readonly<Record<string, Component>> = { caution: CautionView, clip: ClipView, figure: FigureView, limit: LimitView, steps: StepsView, step: StepView }

/** The lesson's own grammar, with our blocks drawn for writing, and keys for the strokes of steps. */
export function editorExtensions(): Extensions {
  return lessonExtensions().map((extension) => {
    const view = views[extension.name]
    if (!view || extension.type !== 'node') return extension
    const drawn = extension.extend({ addNodeView: () => VueNodeViewRenderer(view as Parameters<typeof VueNodeViewRenderer>[0]) })
    if (extension.name !== 'step') return drawn
    return drawn.extend({
      addKeyboardShortcuts() {
        return {
          // The next stroke; an empty one ends the list. A stroke that cannot be undone does not make the next one so.
          'Enter': () => this.editor.commands.splitListItem('step', { cannotBeUndone: false }),
          'Mod-Enter': () => this.editor.isActive('step') && this.editor.commands.splitBlock(),
          'Mod-Shift-u': () => this.editor.isActive('step') && this.editor.commands.updateAttributes('step', { cannotBeUndone: !this.editor.getAttributes('step').cannotBeUndone }),
        }
      },
    })
  })
}
