import { readFileSync } from 'node:fs'
import { expect, it } from 'vitest'
import { readContent } from '#server/db/seeders/content'
import { readLesson } from '#server/db/seeders/read-lesson'
import { lessonHtml } from '#server/services/lessons/lesson-html'
import type { LessonNode } from '#shared/contract/lesson-document'
import { attributeRules } from '#shared/lesson/attribute-rules'
import { checkDocument } from '#shared/lesson/check-document'
import { isLessonLink } from '#shared/lesson/lesson-link'
import { lessonSchema } from '#shared/lesson/lesson-schema'
import { sectionsOf } from '#shared/lesson/sections-of'
import { withHeadingIds } from '#shared/lesson/with-heading-ids'
import { documentOf, good, heading, words } from './curriculum'

const film = '3f0e7c1a-1111-4222-8333-444455556666'
const linked = (href: string): LessonNode => ({ type: 'paragraph', content: [{ type: 'text', text: 'here', marks: [{ type: 'link', attrs: { href } }] }] })
const issuesOf = (...content: unknown[]) => checkDocument({ type: 'doc', content }).issues?.map(issue => issue.path)
const html = (...content: LessonNode[]) => lessonHtml(good(...content), { limits: {}, media: {} })

it('takes every block there is, nested as a lesson nests them', () => {
  const step = (cannotBeUndone: boolean, ...content: LessonNode[]): LessonNode => ({ type: 'step', attrs: { cannotBeUndone }, content })
  const cell = (type: string, text: string): LessonNode => ({ type, content: [words(text)] })
  expect(checkDocument(documentOf(
    heading('Fit'),
    { type: 'caution', content: [words('Eyes on.'), { type: 'bulletList', content: [{ type: 'listItem', content: [words('Both.')] }] }] },
    { type: 'steps', content: [step(false, words('Set the ball.')), step(true, words('Cut.'), { type: 'limit', attrs: { criterion: 'W-01' } })] },
    { type: 'figure', attrs: { drawing: 'bowl-curve', alt: 'The ball.', caption: '' } },
    { type: 'clip', attrs: { asset: film, start: 2, end: 9.5, caption: 'Dropped in.' } },
    { type: 'table', content: [{ type: 'tableRow', content: [cell('tableHeader', 'a'), cell('tableHeader', 'b')] }, { type: 'tableRow', content: [cell('tableCell', '1'), cell('tableCell', '2')] }] },
    linked('/lessons/bowl#fit'),
  )).issues).toBeNull()
})

it('says a rule for every attribute of the grammar, so that none goes unchecked', () => {
  const attributed = [...Object.values(lessonSchema.nodes), ...Object.values(lessonSchema.marks)].map(type => [type.name, Object.keys(type.spec.attrs ?? {}).sort()] as const).filter(([, names]) => names.length > 0)
  expect(Object.fromEntries(attributed)).toEqual(Object.fromEntries(Object.entries(attributeRules).map(([name, rules]) => [name, Object.keys(rules).sort()])))
})

it.each([
  ['an unknown block', [{ type: 'iframe', attrs: { src: 'https://elsewhere.example' } }], 'content.0.type'],
  ['a block named after a part of every object', [{ type: 'constructor' }], 'content.0.type'],
  ['a script as a block', [{ type: 'script', content: [{ type: 'text', text: 'alert(1)' }] }], 'content.0.type'],
  ['an unknown mark', [{ type: 'paragraph', content: [{ type: 'text', text: 'a', marks: [{ type: 'highlight' }] }] }], 'content.0.content.0.marks.0.type'],
  ['an attribute a block does not have', [{ type: 'paragraph', attrs: { onclick: 'alert(1)' } }], 'content.0.attrs.onclick'],
  ['an attribute of the wrong type', [{ type: 'steps', content: [{ type: 'step', attrs: { cannotBeUndone: 'yes' }, content: [words('a')] }] }], 'content.0.content.0.attrs.cannotBeUndone'],
  ['a first-level heading', [heading('Big', 1)], 'content.0.attrs.level'],
  ['an address of a heading with a quote in it', [{ ...heading('Fit'), attrs: { level: 2, id: 'a" onclick="x' } }], 'content.0.attrs.id'],
  ['a drawing by a path', [{ type: 'figure', attrs: { drawing: '../secret', alt: 'a' } }], 'content.0.attrs.drawing'],
  ['a picture from elsewhere', [{ type: 'figure', attrs: { asset: 'https://elsewhere.example/x.png', alt: 'a' } }], 'content.0.attrs.asset'],
  ['a figure of two pictures', [{ type: 'figure', attrs: { asset: film, drawing: 'bowl-curve', alt: 'a' } }], 'content.0.attrs'],
  ['a clip that starts before it begins', [{ type: 'clip', attrs: { asset: film, start: -1 } }], 'content.0.attrs.start'],
  ['a clip that starts at no number', [{ type: 'clip', attrs: { asset: film, start: Number.NaN } }], 'content.0.attrs.start'],
  ['a clip that starts at 1e999', [{ type: 'clip', attrs: { asset: film, start: JSON.parse('1e999') as number } }], 'content.0.attrs.start'],
  ['a clip that ends before it starts', [{ type: 'clip', attrs: { asset: film, start: 9, end: 9 } }], 'content.0.attrs'],
  ['a clip of nothing', [{ type: 'clip', attrs: { start: 0 } }], 'content.0.attrs.asset'],
  ['a limit that names no criterion', [{ type: 'limit', attrs: { criterion: '"><script>' } }], 'content.0.attrs.criterion'],
  ['a step outside steps', [{ type: 'step', attrs: { cannotBeUndone: false }, content: [words('a')] }], ''],
  ['words that stand in no paragraph', [{ type: 'text', text: 'a' }], ''],
  ['steps without a step', [{ type: 'steps' }], 'content.0'],
  ['a list of paragraphs', [{ type: 'bulletList', content: [words('a')] }], 'content.0'],
  ['a bold block', [{ ...heading('a'), marks: [{ type: 'bold' }] }], 'content.0.marks'],
  ['a NUL', [words('a\0b')], 'content.0.content.0.text'],
  ['a lone surrogate', [words('a\uD800')], 'content.0.content.0.text'],
  ['a lone surrogate in a caption', [{ type: 'figure', attrs: { drawing: 'a', alt: '\uDC00' } }], 'content.0.attrs.alt'],
  ['text that is a number', [{ type: 'paragraph', content: [{ type: 'text', text: 5 }] }], 'content.0.content.0.text'],
  ['text of no letters', [{ type: 'paragraph', content: [{ type: 'text', text: '' }] }], 'content.0.content.0.text'],
  ['a part that no document has', [{ ...words('a'), html: '<b>' }], 'content.0.html'],
  ['content that is no list', [{ type: 'paragraph', content: { 0: 'a' } }], 'content.0.content'],
  ['nothing', [null], 'content.0'],
  ['no blocks at all', [], ''],
])('refuses %s and says where', (_what, content, path) => {
  expect(issuesOf(...content)).toContain(path)
})

it.each(['javascript:alert(1)', 'JavaScript:alert(1)', 'java\nscript:alert(1)', '\u0001javascript:alert(1)', 'data:text/html,<script>', 'vbscript:x', '//elsewhere.example', '/\\elsewhere.example', '/api/me', 'https://us@elsewhere.example', 'https://', 'file:///etc/passwd', ''])('refuses a link to %j', (href) => {
  expect(isLessonLink(href)).toBe(false)
  expect(issuesOf(linked(href))).toEqual(['content.0.content.0.marks.0.attrs.href'])
})
it.each(['https://standards.example/a?b=1#c', 'http://x.example', 'mailto:corin@sallowbeck.example', '/lessons/bowl', '/lessons/bowl#fit', '#fit'])('takes a link to %s', (href) => {
  expect(issuesOf(linked(href))).toBeUndefined()
})

it('refuses what is nested more deeply than a page can need, however deep, without falling over', () => {
  const nest = (depth: number): LessonNode => {
    let node = words('core')
    for (let level = 0; level < depth; level += 1) node = { type: 'caution', content: [node] }
    return node
  }
  // doc, cautions, paragraph and text: 24 levels in all.
  expect(issuesOf(nest(21))).toBeUndefined()
  expect(issuesOf(nest(22))).toHaveLength(1)
  expect(issuesOf(nest(5000))).toHaveLength(1)
})

it('stops counting mistakes at fifty', () => {
  expect(issuesOf(...Array.from({ length: 400 }, () => ({ type: 'iframe' })))).toHaveLength(50)
})

it('writes a document anew: defaults filled in, marks in one order, nothing unknown left', () => {
  const { document } = checkDocument(documentOf({ type: 'paragraph', content: [{ type: 'text', text: 'a', marks: [{ type: 'italic' }, { type: 'bold' }] }] }, { type: 'clip', attrs: { asset: film } }))
  const swapped = checkDocument(documentOf({ type: 'paragraph', content: [{ type: 'text', text: 'a', marks: [{ type: 'bold' }, { type: 'italic' }] }] }, { type: 'clip', attrs: { asset: film } })).document
  expect(document).toEqual(swapped)
  expect(document?.content?.[1]).toEqual({ type: 'clip', attrs: { asset: film, start: 0, end: null, caption: '' } })
})

it('gives every heading an address of its own, and keeps those it had', () => {
  const first = withHeadingIds(documentOf(heading('Fit'), heading('Fit'), heading('Façade & Form'), heading('…')))
  expect(sectionsOf(first).map(one => one.id)).toEqual(['fit', 'fit-2', 'facade-form', 'part'])
  // Renamed, and a new one of the old words put before it: notes still point at the old one.
  const old = first.content?.[0] as LessonNode
  const renamed = { ...old, content: [{ type: 'text', text: 'Fit and lift' }] }
  expect(sectionsOf(withHeadingIds(documentOf(heading('Fit'), renamed))).map(one => [one.heading, one.id])).toEqual([['Fit', 'fit-2'], ['Fit and lift', 'fit']])
  // Copied with its address: the copy gets another.
  expect(sectionsOf(withHeadingIds(documentOf(renamed, structuredClone(renamed)))).map(one => one.id)).toEqual(['fit', 'fit-and-lift'])
})

it('shows script as words, in text, in attributes and in captions', () => {
  const evil = '<script>alert(1)</script>"><img src=x onerror=alert(1)>'
  const out = html(words(evil), heading(evil), { type: 'figure', attrs: { drawing: 'bowl-curve', alt: evil, caption: evil } }, { type: 'clip', attrs: { asset: film, caption: evil } })
  // A browser's own reading of it: no element that runs, no attribute that does.
  const tags = [...out.matchAll(/<([a-z][a-z0-9]*)((?:\s+[a-z-]+(?:="[^"]*")?)*)\s*\/?>/g)]
  expect(new Set(tags.map(([, name]) => name))).toEqual(new Set(['p', 'h2', 'figure', 'img', 'figcaption', 'div']))
  expect(tags.flatMap(([, , attrs = '']) => [...attrs.matchAll(/\s([a-z-]+)(?:="[^"]*")?/g)].map(([, name]) => name)).filter(name => name?.startsWith('on'))).toEqual([])
  expect(out).toContain('<p>&lt;script&gt;alert(1)&lt;/script&gt;"&gt;&lt;img src=x onerror=alert(1)&gt;</p>')
  expect(out.replaceAll(/<[^>]*>/g, '')).not.toMatch(/<script/)
})

it('cleans what is rendered a second time: a link that got past the check does not run', () => {
  for (const href of ['javascript:alert(1)', '//elsewhere.example', 'ftp://elsewhere.example']) {
    expect(lessonHtml(documentOf({ type: 'paragraph', content: [{ type: 'text', text: 'here', marks: [{ type: 'link', attrs: { href } }] }] }), { limits: {}, media: {} })).toBe('<p><a>here</a></p>')
  }
})

it('says all a block has to say in words', () => {
  const out = html(
    { type: 'caution', content: [words('Eyes on.')] },
    { type: 'steps', content: [{ type: 'step', attrs: { cannotBeUndone: true }, content: [words('Cut.')] }, { type: 'step', attrs: { cannotBeUndone: false }, content: [words('Wipe.')] }] },
    { type: 'figure', attrs: { drawing: 'bowl-curve', alt: 'The ball under the land.', caption: 'Where the ball must touch' } },
  )
  expect(out).toBe('<aside class="lesson-caution" data-block="caution" role="note" aria-label="Caution"><p>Eyes on.</p></aside>'
    + '<ol class="lesson-steps" data-block="steps"><li class="lesson-step" data-block="step" data-cannot-be-undone="true"><p class="lesson-undone">Cannot be undone.</p><p>Cut.</p></li><li class="lesson-step" data-block="step"><p>Wipe.</p></li></ol>'
    + '<figure data-block="figure"><img src="/drawings/bowl-curve.svg" alt="The ball under the land." loading="lazy" /><figcaption>Where the ball must touch</figcaption></figure>')
})

const read = (markdown: string, clips = new Map([['dummy', film]])) => readLesson({ file: 'x.md', markdown, clips })

it('reads our blocks from Markdown', () => {
  const document = read('# Title\n\nOne\ntwo **bold *both***.\n\n::: steps\n1. Cut. {cannot be undone}\n\n   ::: limit W-01\n\n   Then look.\n2. Wipe.\n:::\n\n::: clip name=dummy start=1.5 end=9 caption="A \\"good\\" one"\n\n::: caution\nEyes.\n:::')
  expect(document.content?.map(node => node.type)).toEqual(['paragraph', 'steps', 'clip', 'caution'])
  expect(document.content?.[0]?.content).toEqual([{ type: 'text', text: 'One two ' }, { type: 'text', text: 'bold ', marks: [{ type: 'bold' }] }, { type: 'text', text: 'both', marks: [{ type: 'bold' }, { type: 'italic' }] }, { type: 'text', text: '.' }])
  expect(document.content?.[1]?.content?.map(step => [step.attrs?.cannotBeUndone, step.content?.map(node => node.type)])).toEqual([[true, ['paragraph', 'limit', 'paragraph']], [false, ['paragraph']]])
  expect(document.content?.[1]?.content?.[0]?.content?.[0]).toEqual(words('Cut.'))
  expect(document.content?.[2]?.attrs).toEqual({ asset: film, start: 1.5, end: 9, caption: 'A "good" one' })
})

it.each([
  ['a block never ended', '::: caution\nEyes.', /line 1 of the text: "::: caution" is never ended/],
  ['an end of nothing', 'a\n\n:::', /line 3 of the text: nothing is open/],
  ['an unknown block', '::: video name=a', /no block called video/],
  ['a clip nobody has', '::: clip name=other caption=a', /no clip called "other"/],
  ['a value nobody reads', '::: figure drawing=a alt=b width=3', /a figure has no "width"/],
  ['words outside quotes', '::: figure drawing=a alt=two words', /"words" is not read/],
  ['steps that are no list', '::: steps\nCut.\n:::', /steps hold one numbered list/],
  ['a Markdown picture', '![far](https://elsewhere.example/x.png)', /"image" is no part of a lesson/],
  ['a heading too deep', '##### deep', /a heading is ## to ####/],
  ['a criterion that is none', '::: limit seat', /content\.0\.attrs\.criterion/],
  ['a link to a place of ours that is no lesson', '[a](/api/me)', /href/],
])('refuses %s in a Markdown lesson, and says where', (_what, markdown, says) => {
  expect(() => read(markdown)).toThrow(says)
})

it('shows HTML in a Markdown lesson as words', () => {
  expect(lessonHtml(read('a <b onclick="x">b</b>\n\n<script>alert(1)</script>'), { limits: {}, media: {} })).toBe('<p>a &lt;b onclick="x"&gt;b&lt;/b&gt;</p><p>&lt;script&gt;alert(1)&lt;/script&gt;</p>')
})

it('reads every lesson of the curriculum: fourteen, none with Markdown left over, each drawing there', () => {
  const { lessons, rubric, course } = readContent()
  // Fourteen lessons: handbook 5.3.
  expect(lessons.map(one => one.number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14])
  const criteria = new Set(rubric.stages.flatMap(stage => stage.criteria.map(one => one.id)))
  for (const { file, markdown, module } of lessons) {
    const clips = new Map([...markdown.matchAll(/::: clip name=(\S+)/g)].map(([, name = '']) => [name, film]))
    const document = readLesson({ file, markdown, clips })
    const out = lessonHtml(document, { limits: {}, media: {} })
    expect(out.includes('<table>'), file).toBe(/^\|[\s:-]*---/m.test(markdown))
    expect(out.replaceAll(/<code>.*?<\/code>/g, ''), file).not.toMatch(/\*\*|^\||:::|\{cannot/m)
    for (const [, drawing] of out.matchAll(/src="\/drawings\/([a-z0-9-]+\.svg)"/g)) expect(readFileSync(new URL(`../../../public/drawings/${drawing}`, import.meta.url), 'utf8'), file).toContain('<svg')
    for (const [, id = ''] of out.matchAll(/data-criterion="([^"]+)"/g)) expect(criteria.has(id), `${file} ${id}`).toBe(true)
    expect(course.modules.map(one => one.number)).toContain(module)
  }
})
