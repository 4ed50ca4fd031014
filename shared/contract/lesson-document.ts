/** A lesson as the editor keeps it: the JSON of a Tiptap document. What may be in it is said by the schema in `shared/lesson`. */
export interface LessonNode {
  type: string
  attrs?: Record<string, unknown>
  content?: LessonNode[]
  text?: string
  marks?: { type: string, attrs?: Record<string, unknown> }[]
}

export interface LessonDocument extends LessonNode { type: 'doc' }
