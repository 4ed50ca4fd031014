export type XmlValue = string | number | boolean | undefined | XmlValue[] | { [name: string]: XmlValue }

const escape = (text: string) => text.replace(/[&<>"'\r]/g, character => `&#${character.charCodeAt(0)};`)

function element(name: string, value: XmlValue): string {
  if (value === undefined) return ''
  if (Array.isArray(value)) return value.map(one => element(name, one)).join('')
  if (typeof value === 'object') return `<${name}>${Object.entries(value).map(([child, inner]) => element(child, inner)).join('')}</${name}>`
  return `<${name}>${escape(String(value))}</${name}>`
}

/** A whole document; an array repeats its element, undefined leaves it out. */
export function xml(root: string, value: XmlValue): string {
  const namespace = root === 'Error' ? '' : ' xmlns="http://s3.amazonaws.com/doc/2006-03-01/"'
  return `<?xml version="1.0" encoding="UTF-8"?>\n${element(root, value).replace(`<${root}>`, `<${root}${namespace}>`)}`
}
