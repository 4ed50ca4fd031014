import MarkdownIt from 'markdown-it'
import type { StateBlock, Token } from 'markdown-it/index.js'
import type { LessonDocument, LessonNode } from '../../../shared/contract/lesson-document'
import { checkDocument } from '../../../shared/lesson/check-document'
import { withHeadingIds } from '../../../shared/lesson/with-heading-ids'

export interface LessonSource { file: string, markdown: string, clips: ReadonlyMap<string, string> }

/**
 * A lesson of content/lessons as a document: Markdown and our blocks, as content/lessons/README.md says them.
 *
 * @param source.clips ids of the demo films by their names
 * @throws {Error} naming file and line, on whatever a lesson cannot hold
 */
export function readLesson({ file, markdown, clips }: LessonSource): LessonDocument {
  const fail: Fail = (token, says) => {
    throw new Error(`content/lessons/${file}${token?.map ? `, line ${token.map[0] + 1} of the text` : ''}: ${says}`)
  }
  const tokens = reader(fail).parse(markdown, {})
  const content = blocks({ tokens, next: 0 }, null, { fail, clips })
  const { document, issues } = checkDocument({ type: 'doc', content })
  if (!document) fail(null, issues.map(issue => `${issue.path}: ${issue.message}`).join('; '))
  return withHeadingIds(document as LessonDocument)
}

type Fail = (token: Pick<Token, 'map'> | null, says: string) => never
interface Cursor { tokens: readonly Token[], next: number }
interface Given { fail: Fail, clips: ReadonlyMap<string, string> }

const holders = new Set(['caution', 'steps'])
const opening = /^:::\s+(\S+)(?:\s+(.*))?$/

/** Markdown as it is commonly written, and our `:::` blocks. */
function reader(fail: Fail): MarkdownIt {
  const markdown = new MarkdownIt({ html: false, linkify: false, typographer: false }).disable(['strikethrough', 'code', 'fence', 'hr', 'blockquote', 'html_block', 'reference'])
  markdown.block.ruler.before('list', 'lesson_block', (state, startLine, endLine, silent) => {
    const line = lineOf(state, startLine)
    const [, name = '', rest = ''] = opening.exec(line) ?? []
    if (name === '') {
      if (line === ':::') fail({ map: [startLine, startLine] }, 'nothing is open here that ":::" could end')
      return false
    }
    if (silent) return true
    if (!holders.has(name)) {
      const token = state.push('lesson_leaf', '', 0)
      Object.assign(token, { info: name, content: rest, map: [startLine, startLine + 1] })
      state.line = startLine + 1
      return true
    }
    let depth = 1
    let end = startLine
    while (depth > 0) {
      end += 1
      if (end >= endLine) fail({ map: [startLine, startLine] }, `"::: ${name}" is never ended by ":::"`)
      const text = lineOf(state, end)
      if (text === ':::') depth -= 1
      else if (holders.has(opening.exec(text)?.[1] ?? '')) depth += 1
    }
    const { lineMax, parentType } = state
    Object.assign(state.push('lesson_open', '', 1), { info: name, map: [startLine, end] })
    Object.assign(state, { lineMax: end })
    state.md.block.tokenize(state, startLine + 1, end)
    Object.assign(state, { lineMax, parentType, line: end + 1 })
    Object.assign(state.push('lesson_close', '', -1), { info: name })
    return true
  }, { alt: ['paragraph', 'list'] })
  return markdown
}

const lineOf = (state: StateBlock, line: number): string => state.src.slice((state.bMarks[line] ?? 0) + (state.tShift[line] ?? 0), state.eMarks[line] ?? 0).trim()

/** The blocks up to the token that closes them. */
function blocks(cursor: Cursor, until: string | null, given: Given): LessonNode[] {
  const made: LessonNode[] = []
  for (let token = cursor.tokens[cursor.next]; token && token.type !== until; token = cursor.tokens[cursor.next]) {
    cursor.next += 1
    const node = block(token, cursor, given)
    if (node) made.push(node)
  }
  cursor.next += 1
  return made
}

function block(token: Token, cursor: Cursor, given: Given): LessonNode | null {
  const { fail } = given
  const inside = (until: string): LessonNode[] => blocks(cursor, until, given)
  const words = (until: string): LessonNode[] => {
    const inner = cursor.tokens[cursor.next]
    cursor.next += 1
    if (inner?.type !== 'inline') return []
    if (cursor.tokens[cursor.next]?.type === until) cursor.next += 1
    return inline(inner, fail)
  }
  const align = /text-align:(left|center|right)/.exec(token.attrGet('style') ?? '')?.[1] ?? null
  const cell = (type: string, until: string): LessonNode => ({ type, attrs: { align }, content: [paragraph(words(until))] })
  switch (token.type) {
    case 'paragraph_open': return paragraph(words('paragraph_close'))
    case 'heading_open': {
      const level = Number(token.tag.slice(1))
      const content = words('heading_close')
      // The title stands above the lesson already.
      if (level === 1 && token.map?.[0] === firstLine(cursor.tokens)) return null
      if (level < 2 || level > 4) fail(token, `a heading is ## to ####, not ${'#'.repeat(level)}`)
      return { type: 'heading', attrs: { level }, content }
    }
    case 'bullet_list_open': return { type: 'bulletList', content: inside('bullet_list_close') }
    case 'ordered_list_open': return { type: 'orderedList', attrs: { start: Number(token.attrGet('start') ?? 1) }, content: inside('ordered_list_close') }
    case 'list_item_open': {
      const content = inside('list_item_close')
      return { type: 'listItem', content: content[0]?.type === 'paragraph' ? content : [{ type: 'paragraph' }, ...content] }
    }
    case 'table_open': return { type: 'table', content: inside('table_close').flatMap(part => part.content ?? []) }
    case 'thead_open': return { type: 'rows', content: inside('thead_close') }
    case 'tbody_open': return { type: 'rows', content: inside('tbody_close') }
    case 'tr_open': return { type: 'tableRow', content: inside('tr_close') }
    case 'th_open': return cell('tableHeader', 'th_close')
    case 'td_open': return cell('tableCell', 'td_close')
    case 'lesson_leaf': return leaf(token, given)
    case 'lesson_open': {
      const content = inside('lesson_close')
      if (token.info === 'caution') return { type: 'caution', content }
      const [list, ...others] = content
      if (list?.type !== 'orderedList' || others.length > 0) fail(token, 'steps hold one numbered list and nothing else')
      return { type: 'steps', content: (list?.content ?? []).map(step) }
    }
    default: return fail(token, `"${token.type.replace(/_open$/, '')}" is no part of a lesson`)
  }
}

const paragraph = (content: LessonNode[]): LessonNode => content.length === 0 ? { type: 'paragraph' } : { type: 'paragraph', content }
const firstLine = (tokens: readonly Token[]): number | undefined => tokens[0]?.map?.[0]

const undone = /\s*\{cannot be undone\}\s*$/

/** A point of a numbered list as a step; the words in braces at the end of its first paragraph become the mark. */
function step(item: LessonNode): LessonNode {
  const [first, ...rest] = item.content ?? []
  const last = first?.content?.at(-1)
  const cannotBeUndone = undone.test(last?.text ?? '')
  const text = last?.text?.replace(undone, '') ?? ''
  const words = cannotBeUndone ? [...(first?.content ?? []).slice(0, -1), ...(text === '' ? [] : [{ ...last, type: 'text', text }])] : first?.content ?? []
  return { type: 'step', attrs: { cannotBeUndone }, content: [paragraph(words), ...rest] }
}

/** One-line blocks: their name, then `key=value` or `key="value"`. */
function leaf(token: Token, { fail, clips }: Given): LessonNode {
  if (token.info === 'limit') return { type: 'limit', attrs: { criterion: token.content.trim() } }
  const values = new Map<string, string>()
  const rest = token.content.replaceAll(/(\w+)=(?:"((?:[^"\\]|\\.)*)"|(\S+))/g, (_, name: string, quoted: string | undefined, bare: string | undefined) => {
    values.set(name, quoted === undefined ? bare ?? '' : quoted.replaceAll(/\\(.)/g, '$1'))
    return ''
  }).trim()
  if (rest !== '') fail(token, `"${rest}" is not read: write name=value, with quotes round spaces`)
  const take = (name: string): string | null => {
    const value = values.get(name) ?? null
    values.delete(name)
    return value
  }
  const seconds = (name: string): number | null => {
    const value = take(name)
    if (value === null) return null
    return /^\d+(\.\d+)?$/.test(value) ? Number(value) : fail(token, `${name}=${value} is no number of seconds`)
  }
  const node = ((): LessonNode => {
    if (token.info === 'figure') return { type: 'figure', attrs: { drawing: take('drawing') ?? fail(token, 'a figure names its drawing'), alt: take('alt') ?? '', caption: take('caption') ?? '' } }
    if (token.info !== 'clip') return fail(token, `there is no block called ${token.info}`)
    const name = take('name') ?? ''
    return { type: 'clip', attrs: { asset: clips.get(name) ?? fail(token, `there is no clip called "${name}"`), start: seconds('start') ?? 0, end: seconds('end'), caption: take('caption') ?? '' } }
  })()
  const [unread] = values.keys()
  return unread === undefined ? node : fail(token, `a ${token.info} has no "${unread}"`)
}

const markNames: Readonly<Record<string, string>> = { strong: 'bold', em: 'italic', link: 'link' }

function inline(token: Token, fail: Fail): LessonNode[] {
  const made: LessonNode[] = []
  const open: NonNullable<LessonNode['marks']> = []
  const say = (text: string, marks = open): void => {
    if (text === '') return
    const last = made.at(-1)
    if (last?.type === 'text' && JSON.stringify(last.marks ?? []) === JSON.stringify(marks)) last.text += text
    else made.push({ type: 'text', text, ...(marks.length > 0 ? { marks: [...marks] } : {}) })
  }
  for (const one of token.children ?? []) {
    const [, kind = '', side = ''] = /^(\w+?)_(open|close)$/.exec(one.type) ?? []
    if (one.type === 'text') say(one.content)
    else if (one.type === 'softbreak') say(' ')
    else if (one.type === 'hardbreak') made.push({ type: 'hardBreak' })
    else if (one.type === 'code_inline') say(one.content, [{ type: 'code' }])
    else if (markNames[kind] === undefined) fail(token, `"${one.type}" is no part of a lesson`)
    else if (side === 'close') open.splice(open.findLastIndex(mark => mark.type === markNames[kind]), 1)
    else open.push(kind === 'link' ? { type: 'link', attrs: { href: one.attrGet('href') } } : { type: markNames[kind] ?? kind })
  }
  return made
}
