import { renderToHTMLString } from '@tiptap/static-renderer/pm/html-string'
import sanitize from 'sanitize-html'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { LimitView } from '#shared/contract/lessons'
import type { MediaView } from '#shared/contract/media'
import { lessonExtensions } from '#shared/lesson/lesson-extensions'
import { attributes, element, escaped } from './html-text'

export interface LessonBlocks { limits: Readonly<Record<string, LimitView>>, media: Readonly<Record<string, Pick<MediaView, 'title' | 'fileUrl' | 'width' | 'height'>>> }
type Attrs = Readonly<Record<string, unknown>>

/**
 * A checked document as HTML that may be put into a page as it is. Every block says all it has to in words; the page draws gauges and
 * films in the place of those it knows (`data-block`).
 *
 * Text and attributes are escaped where they are written; what comes out is then cleaned of every element and attribute a lesson has no
 * use for, so that a mistake here cannot become a script.
 */
export function lessonHtml(document: LessonDocument, { limits, media }: LessonBlocks): string {
  let clips = 0
  const html = renderToHTMLString({
    content: document,
    extensions: lessonExtensions(),
    options: {
      nodeMapping: {
        caution: ({ children }) => element('aside', { 'class': 'lesson-caution', 'data-block': 'caution', 'role': 'note', 'aria-label': 'Caution' }, joined(children)),
        steps: ({ children }) => element('ol', { 'class': 'lesson-steps', 'data-block': 'steps' }, joined(children)),
        step: ({ node, children }) => step(node.attrs, joined(children)),
        figure: ({ node }) => figure(node.attrs, media),
        limit: ({ node }) => limit(node.attrs, limits),
        clip: ({ node }) => clip(node.attrs, media, ++clips),
        // Wider than a phone, a table scrolls by itself, also by the keyboard.
        table: ({ children }) => element('div', { 'class': 'lesson-table', 'role': 'group', 'aria-label': 'Table', 'tabindex': '0' }, element('table', {}, element('tbody', {}, joined(children)))),
        tableHeader: ({ node, children }) => element('th', cell(node.attrs), joined(children)),
        tableCell: ({ node, children }) => element('td', cell(node.attrs), joined(children)),
      },
    },
  })
  return sanitize(html, allowed)
}

const joined = (children: unknown): string => [children ?? ''].flat().join('')

function step({ cannotBeUndone }: Attrs, children: string): string {
  const mark = cannotBeUndone === true ? element('p', { class: 'lesson-undone' }, 'Cannot be undone.') : ''
  return element('li', { 'class': 'lesson-step', 'data-block': 'step', 'data-cannot-be-undone': cannotBeUndone === true ? 'true' : null }, mark + children)
}

function figure({ asset, drawing, alt, caption }: Attrs, media: LessonBlocks['media']): string {
  const upload = typeof asset === 'string' ? media[asset] : undefined
  const src = typeof drawing === 'string' ? `/drawings/${drawing}.svg` : upload?.fileUrl ?? null
  const picture = src === null ? element('p', {}, 'No picture yet.') : `<img${attributes({ src, alt: String(alt), loading: 'lazy', width: upload?.width ?? null, height: upload?.height ?? null })}>`
  return element('figure', { 'data-block': 'figure' }, picture + (caption === '' ? '' : element('figcaption', {}, escaped(String(caption)))))
}

function limit({ criterion }: Attrs, limits: LessonBlocks['limits']): string {
  const id = String(criterion)
  const view = limits[id]
  const lines = !view
    ? [`Limit ${id}: the rubric has no such criterion.`]
    : [`${view.title} (${id})`, ...view.bands.map(({ side, at, liftShare, words, hard }) => [
        [side, at, liftShare === null ? null : `at a lift of ${liftShare} of the valve head`].filter(Boolean).join(', '), [words, hard].filter(Boolean).join('. '),
      ].filter(Boolean).join(': ')), ...(view.bands.length === 0 ? [`Does not apply to ${view.casting?.name ?? 'this casting'}.`] : [])]
  return element('div', { 'data-block': 'limit', 'data-criterion': id }, lines.map((line, index) => element('p', {}, index === 0 && view ? element('strong', {}, escaped(line)) : escaped(line))).join(''))
}

function clip({ asset, start, end, caption }: Attrs, media: LessonBlocks['media'], count: number): string {
  const film = media[String(asset)]
  const words = String(caption) || film?.title || 'Film'
  const inside = film ? element('a', { href: film.fileUrl }, `Film: ${escaped(words)}`) : `${escaped(words)} (this film is not there)`
  return element('div', { 'id': `clip-${count}`, 'data-block': 'clip', 'data-asset': String(asset), 'data-start': Number(start), 'data-end': end === null ? null : Number(end), 'data-caption': String(caption) }, element('p', {}, inside))
}

/** Without an inline style, which the page's own rules refuse. */
function cell({ colspan, rowspan, align }: Attrs): Record<string, string | number | null> {
  return { colspan: colspan === 1 ? null : Number(colspan), rowspan: rowspan === 1 ? null : Number(rowspan), class: align === 'right' || align === 'center' ? `lesson-${align}` : null }
}

const ofCell = ['colspan', 'rowspan', 'class']
const allowed: sanitize.IOptions = {
  allowedTags: ['h2', 'h3', 'h4', 'p', 'ul', 'ol', 'li', 'br', 'strong', 'em', 'code', 'a', 'table', 'thead', 'tbody', 'tr', 'th', 'td', 'figure', 'figcaption', 'img', 'aside', 'div'],
  allowedAttributes: {
    h2: ['id'], h3: ['id'], h4: ['id'],
    a: ['href', 'rel'], ol: ['start', 'type', 'class', 'data-block'], li: ['class', 'data-block', 'data-cannot-be-undone'], p: ['class'], th: ofCell, td: ofCell,
    img: ['src', 'alt', 'loading', 'width', 'height'], figure: ['data-block'], aside: ['class', 'data-block', 'role', 'aria-label'],
    div: ['id', 'class', 'tabindex', 'role', 'aria-label', 'data-block', 'data-criterion', 'data-asset', 'data-start', 'data-end', 'data-caption'],
  },
  allowedClasses: { ol: ['lesson-steps'], li: ['lesson-step'], p: ['lesson-undone'], aside: ['lesson-caution'], div: ['lesson-table'], th: ['lesson-right', 'lesson-center'], td: ['lesson-right', 'lesson-center'] },
  allowedSchemes: ['http', 'https', 'mailto'],
  allowedSchemesByTag: { img: [] },
  allowProtocolRelative: false,
  disallowedTagsMode: 'discard',
  // Another site learns nothing of who followed a link from us.
  transformTags: { a: (tagName, attribs) => ({ tagName, attribs: /^https?:/i.test(attribs.href ?? '') ? { ...attribs, rel: 'noopener noreferrer' } : attribs }) },
}
