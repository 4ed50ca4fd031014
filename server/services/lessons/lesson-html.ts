import MarkdownIt from 'markdown-it'

/**
 * A lesson's Markdown as HTML that may be put into a page as it is.
 *
 * HTML in the text is shown as text, links other than http, https and mailto stay text (markdown-it's own rule), and pictures are
 * left out: the starter curriculum has none, and a page asks nobody outside the school for one.
 */
export function lessonHtml(markdown: string): string {
  const reader = new MarkdownIt({ html: false, linkify: false, typographer: false }).disable('image')
  return reader.render(markdown)
}
