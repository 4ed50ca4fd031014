/** Text as it may stand in HTML, in an element or between the quotes of an attribute. */
export function escaped(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;')
}

/** Attributes as written in a tag, each after a space; null is left out. */
export function attributes(given: Readonly<Record<string, string | number | null>>): string {
  return Object.entries(given).map(([name, value]) => value === null ? '' : ` ${name}="${escaped(String(value))}"`).join('')
}

/** An element; `inner` is HTML already. */
export function element(tag: string, given: Readonly<Record<string, string | number | null>>, inner: string): string {
  return `<${tag}${attributes(given)}>${inner}</${tag}>`
}
