import { Fragment, Mark, type MarkType, type Node, type NodeType } from '@tiptap/pm/model'
import { deepestDocument } from '../contract/lessons'
import type { LessonDocument } from '../contract/lesson-document'
import { attributeRules, togetherRules } from './attribute-rules'
import { lessonSchema } from './lesson-schema'

export interface DocumentIssue { path: string, message: string }
export type CheckedDocument = { document: LessonDocument, issues: null } | { document: null, issues: DocumentIssue[] }

/** As many as a person reads; the rest shows once these are put right. */
const mostIssues = 50

/**
 * A lesson document as it may be kept, or everything that is wrong with it and where ("content.3.attrs.alt").
 *
 * Only nodes, marks and attributes of the lesson schema, each with a value it may have and where it may stand. What is answered is
 * written anew from what was understood, so nothing unknown rides along.
 */
export function checkDocument(given: unknown): CheckedDocument {
  const issues: DocumentIssue[] = []
  const root = readNode(given, '', 1, issues)
  if (root && root.type.name !== 'doc') issues.push({ path: '', message: 'A lesson is a document.' })
  if (!root || issues.length > 0) return { document: null, issues: issues.slice(0, mostIssues) }
  return { document: root.toJSON() as LessonDocument, issues: null }
}

type Json = Readonly<Record<string, unknown>>
const isObject = (value: unknown): value is Json => typeof value === 'object' && value !== null && !Array.isArray(value)
const at = (path: string, name: string | number): string => path === '' ? String(name) : `${path}.${name}`

function readNode(given: unknown, path: string, depth: number, issues: DocumentIssue[]): Node | null {
  if (issues.length >= mostIssues) return null
  const wrong = (message: string, name?: string): null => {
    issues.push({ path: name === undefined ? path : at(path, name), message })
    return null
  }
  if (depth > deepestDocument) return wrong('This is nested too deeply.')
  if (!isObject(given)) return wrong('This is no part of a lesson.')
  const type = typeof given.type === 'string' && Object.hasOwn(lessonSchema.nodes, given.type) ? lessonSchema.nodes[given.type] : undefined
  if (!type) return wrong(`There is no block called ${shown(given.type)}.`, 'type')
  const stranger = Object.keys(given).find(name => !['type', 'attrs', 'content', 'marks', 'text'].includes(name))
  if (stranger !== undefined) return wrong('A lesson has no such part.', stranger)

  const before = issues.length
  const attrs = readAttributes(given.attrs, type, path, issues)
  const marks = readMarks(given.marks, type, path, issues)
  if (type.isText) {
    const words = given.text
    if (typeof words !== 'string' || words === '') return wrong('Text has at least one letter.', 'text')
    if (!words.isWellFormed() || words.includes('\0')) return wrong('This has characters that cannot be kept.', 'text')
    if (given.content !== undefined) return wrong('Text holds nothing else.', 'content')
    return issues.length > before ? null : lessonSchema.text(words, marks)
  }
  if (given.text !== undefined) return wrong('Only text has words of its own.', 'text')
  if (given.content !== undefined && !Array.isArray(given.content)) return wrong('This is not a list of blocks.', 'content')
  const children = (given.content ?? [] as unknown[]).map((child: unknown, index: number) => readNode(child, at(path, `content.${index}`), depth + 1, issues))
  if (issues.length > before) return null
  const content = Fragment.from(children.filter((child: Node | null): child is Node => child !== null))
  if (!type.validContent(content)) return wrong(nesting(type, content))
  return type.create(attrs, content, marks)
}

function readAttributes(given: unknown, type: NodeType | MarkType, path: string, issues: DocumentIssue[]): Record<string, unknown> {
  const rules = attributeRules[type.name] ?? {}
  if (given !== undefined && given !== null && !isObject(given)) issues.push({ path: at(path, 'attrs'), message: 'These are no attributes.' })
  const values = isObject(given) ? given : {}
  for (const name of Object.keys(values)) {
    if (!Object.hasOwn(rules, name)) issues.push({ path: at(path, `attrs.${name}`), message: `${shown(type.name)} has no attribute of that name.` })
  }
  const before = issues.length
  const attrs: Record<string, unknown> = {}
  for (const [name, rule] of Object.entries(rules)) {
    const value = Object.hasOwn(values, name) ? values[name] : (type.spec.attrs?.[name]?.default ?? null)
    const message = rule(value)
    if (message !== null) issues.push({ path: at(path, `attrs.${name}`), message: `"${name}" ${message}.` })
    attrs[name] = value
  }
  const together = issues.length === before ? togetherRules[type.name]?.(attrs) ?? null : null
  if (together !== null) issues.push({ path: at(path, 'attrs'), message: together })
  return attrs
}

function readMarks(given: unknown, node: NodeType, path: string, issues: DocumentIssue[]): readonly Mark[] {
  if (given === undefined || (Array.isArray(given) && given.length === 0)) return Mark.none
  if (!Array.isArray(given) || !node.isInline) {
    issues.push({ path: at(path, 'marks'), message: 'Only words can be bold, italic, code or a link.' })
    return Mark.none
  }
  let marks: readonly Mark[] = Mark.none
  given.forEach((one: unknown, index) => {
    const here = at(path, `marks.${index}`)
    const type = isObject(one) && typeof one.type === 'string' && Object.hasOwn(lessonSchema.marks, one.type) ? lessonSchema.marks[one.type] : undefined
    const stranger = isObject(one) ? Object.keys(one).find(name => !['type', 'attrs'].includes(name)) : undefined
    if (!type || !isObject(one)) issues.push({ path: at(here, 'type'), message: `Words cannot be ${isObject(one) ? shown(one.type) : 'that'}.` })
    else if (stranger !== undefined) issues.push({ path: at(here, stranger), message: 'A lesson has no such part.' })
    else marks = type.create(readAttributes(one.attrs, type, here, issues)).addToSet(marks)
  })
  return marks
}

const names: Readonly<Record<string, string>> = {
  doc: 'a lesson', paragraph: 'a paragraph', heading: 'a heading', bulletList: 'a list', orderedList: 'a numbered list', listItem: 'a point of a list', hardBreak: 'a line break', text: 'words',
  table: 'a table', tableRow: 'a row of a table', tableCell: 'a cell', tableHeader: 'a heading cell', figure: 'a figure', caution: 'a caution', limit: 'a limit', steps: 'steps', step: 'a step', clip: 'a clip',
}
const called = (type: NodeType): string => names[type.name] ?? type.name

function nesting(type: NodeType, content: Fragment): string {
  if (content.childCount === 0) return `There is nothing in ${called(type)}.`
  const held = [...new Set(Array.from({ length: content.childCount }, (_, index) => called(content.child(index).type)))]
  return `${held.join(' and ')} cannot stand so in ${called(type)}.`
}

/** A name as it was sent, short enough to be read out. */
function shown(name: unknown): string {
  return typeof name === 'string' && /^[\w-]{1,40}$/.test(name) ? `"${name}"` : 'that'
}
