import juice from 'juice'
import { createSSRApp, h, type FunctionalComponent } from 'vue'
import { renderToString } from 'vue/server-renderer'
import type { Letter } from './letter'

/** The look of every message; juice puts it on the elements themselves, because many mail programs drop a style sheet. */
const style = `
  body { margin: 0; padding: 24px 12px; background: #e9ecee; color: #15191c; font-family: Arial, Helvetica, sans-serif; font-size: 16px; line-height: 1.5; }
  .sheet { max-width: 560px; margin: 0 auto; padding: 24px; background: #ffffff; border-top: 6px solid #14285e; }
  p { margin: 0 0 16px; }
  .strong { font-weight: bold; }
  ul { margin: 0 0 16px; padding-left: 20px; }
  li { margin: 0 0 6px; }
  .action { display: inline-block; padding: 12px 20px; background: #14285e; color: #ffffff; font-weight: bold; text-decoration: none; }
  .from { margin: 24px 0 0; color: #4a545b; font-size: 14px; }
`

const LetterSheet: FunctionalComponent<{ letter: Letter }> = ({ letter }) => h('div', { class: 'sheet' }, [
  ...letter.paragraphs.flatMap(({ text, strong, items }) => [
    h('p', { class: strong ? 'strong' : undefined }, text),
    ...(items?.length ? [h('ul', items.map(item => h('li', item)))] : []),
  ]),
  ...(letter.action ? [h('p', h('a', { class: 'action', href: letter.action.url }, letter.action.label)), h('p', letter.action.url)] : []),
  h('p', { class: 'from' }, letter.from),
])
LetterSheet.props = ['letter']

/** Both forms of a letter. Whatever a person typed is escaped in the HTML, and a subject is one line of at most 200 characters. */
export async function renderLetter(letter: Letter): Promise<{ subject: string, html: string, text: string }> {
  const sheet = await renderToString(createSSRApp(LetterSheet, { letter }))
  const page = `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><style>${style}</style></head><body>${sheet}</body></html>`
  return {
    subject: oneLine(letter.subject),
    html: juice(page, { removeStyleTags: true }),
    text: asText(letter),
  }
}

function oneLine(text: string): string {
  const line = text.replace(/\s+/g, ' ').trim()
  return [...line].length > 200 ? `${[...line].slice(0, 199).join('')}…` : line
}

function asText({ paragraphs, action, from }: Letter): string {
  const blocks = paragraphs.map(({ text, items }) => [text, ...(items ?? []).map(item => `  - ${item}`)].join('\n'))
  return [...blocks, ...(action ? [`${action.label}:\n${action.url}`] : []), from].join('\n\n') + '\n'
}
