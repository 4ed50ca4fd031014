import type { Extensions } from '@tiptap/core'
import { TableKit } from '@tiptap/extension-table'
import StarterKit from '@tiptap/starter-kit'
import { CautionBlock } from './caution-block'
import { ClipBlock } from './clip-block'
import { FigureBlock } from './figure-block'
import { HeadingIds } from './heading-ids'
import { isLessonLink } from './lesson-link'
import { LimitBlock } from './limit-block'
import { StepBlock } from './step-block'
import { StepsBlock } from './steps-block'

/**
 * What a lesson is made of: the editor edits with these, the server checks and renders with the same. Headings stand below the lesson's
 * title, so they begin at 2.
 */
export function lessonExtensions(): Extensions {
  return [
    StarterKit.configure({
      blockquote: false,
      codeBlock: false,
      horizontalRule: false,
      strike: false,
      underline: false,
      heading: { levels: [2, 3, 4] },
      link: { openOnClick: false, autolink: true, linkOnPaste: true, HTMLAttributes: { target: null, rel: null }, isAllowedUri: isLessonLink },
    }),
    HeadingIds,
    TableKit.configure({ table: { resizable: false } }),
    FigureBlock,
    CautionBlock,
    LimitBlock,
    StepsBlock,
    StepBlock,
    ClipBlock,
  ]
}
