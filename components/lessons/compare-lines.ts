import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'

export interface Line { text: string, only: boolean }

/** A lesson as lines a person can compare: a line a paragraph, heading, cell or block. */
export function linesOf({ title, document }: { title: string, document: LessonDocument }): string[] {
  const lines = [title]
  const words = (node: LessonNode): string => node.type === 'text' ? node.text ?? '' : node.type === 'hardBreak' ? ' ' : (node.content ?? []).map(words).join('')
  const visit = (node: LessonNode, before: string): void => {
    const attrs = node.attrs ?? {}
    switch (node.type) {
      case 'heading': lines.push(`${'#'.repeat(Number(attrs.level ?? 2))} ${words(node)}`); return
      case 'paragraph': {
        const text = words(node)
        if (text) lines.push(`${before}${text}`)
        return
      }
      case 'figure': lines.push(`Picture: ${attrs.alt || 'not described'}${attrs.caption ? `. ${String(attrs.caption)}` : ''}`); return
      case 'clip': lines.push(`Clip: ${attrs.caption || 'no caption'}, ${String(attrs.start ?? 0)} s to ${attrs.end === null || attrs.end === undefined ? 'its end' : `${String(attrs.end)} s`}`); return
      case 'limit': lines.push(`Limit: ${String(attrs.criterion)}`); return
      default: {
        const mark = node.type === 'caution' ? 'Caution: ' : node.type === 'step' ? (attrs.cannotBeUndone ? 'Stroke, cannot be undone: ' : 'Stroke: ') : node.type === 'listItem' ? '– ' : before
        node.content?.forEach((child, at) => visit(child, at === 0 || node.type === 'caution' ? mark : before))
      }
    }
  }
  document.content?.forEach(node => visit(node, ''))
  return lines
}

/** Beyond this many lines in either text the longest common part is not searched for: both are shown as they are. */
const mostLines = 1500

/** Two texts line by line; `only` says that the other has no such line there (longest common subsequence). */
export function compareLines(one: readonly string[], other: readonly string[]): { one: Line[], other: Line[] } {
  if (Math.max(one.length, other.length) > mostLines) return { one: one.map(text => ({ text, only: false })), other: other.map(text => ({ text, only: false })) }
  const width = other.length + 1
  const best = new Uint16Array((one.length + 1) * width)
  const at = (row: number, column: number) => best[row * width + column] ?? 0
  for (let row = one.length - 1; row >= 0; row--) {
    for (let column = other.length - 1; column >= 0; column--) best[row * width + column] = one[row] === other[column] ? at(row + 1, column + 1) + 1 : Math.max(at(row + 1, column), at(row, column + 1))
  }
  const lines: { one: Line[], other: Line[] } = { one: [], other: [] }
  let [row, column] = [0, 0]
  while (row < one.length || column < other.length) {
    const [left, right] = [one[row], other[column]]
    if (left !== undefined && left === right) {
      lines.one.push({ text: left, only: false })
      lines.other.push({ text: left, only: false })
      row++
      column++
    }
    else if (left !== undefined && (right === undefined || at(row + 1, column) >= at(row, column + 1))) {
      lines.one.push({ text: left, only: true })
      row++
    }
    else {
      lines.other.push({ text: right ?? '', only: true })
      column++
    }
  }
  return lines
}
