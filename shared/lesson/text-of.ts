import type { LessonNode } from '../contract/lesson-document'

const inline = new Set(['text', 'hardBreak'])

/** The words of a part of a lesson, blocks a space apart, pictures and clips by what is said of them. */
export function textOf(node: LessonNode): string {
  return gather(node).replaceAll(/\s+/g, ' ').trim()
}

function gather(node: LessonNode): string {
  if (node.type === 'text') return node.text ?? ''
  if (node.type === 'hardBreak') return ' '
  const own = ['alt', 'caption'].map(name => node.attrs?.[name]).filter(one => typeof one === 'string').join(' ')
  const inner = (node.content ?? []).map(gather).join('')
  return inline.has(node.type) ? inner : ` ${own} ${inner} `
}
