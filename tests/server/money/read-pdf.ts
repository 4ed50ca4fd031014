import { inflateSync } from 'node:zlib'

export interface ReadPdf {
  /** As a reader reads it aloud: what is drawn, in the order it is drawn; each piece of text is a line. */
  text: string
  /** Structure tags, in the order they were begun. */
  tags: string[]
  marked: boolean
  language: string | null
  showsTitle: boolean
  title: string | null
  /** Says of itself that it follows PDF/UA-1. */
  universal: boolean
  fontsEmbedded: boolean
}

/**
 * Reads a PDF of ours back: text by each font's own map to Unicode, structure tags, and what it says of itself. A small reader for
 * tests: objects one after another (ISO 32000-1, 7.3), Flate streams, two-byte glyph codes.
 */
export function readPdf(bytes: Uint8Array): ReadPdf {
  const raw = Buffer.from(bytes).toString('latin1')
  const objects = new Map<string, { dict: string, stream: Buffer | null }>()
  for (const found of raw.matchAll(/(\d+) 0 obj\n([^]*?)\nendobj/g)) {
    const [, id = '', body = ''] = found
    const at = body.indexOf('\nstream\n')
    const dict = at < 0 ? body : body.slice(0, at)
    const data = at < 0 ? null : Buffer.from(body.slice(at + 8, body.lastIndexOf('\nendstream')), 'latin1')
    objects.set(id, { dict, stream: data && /FlateDecode/.test(dict) ? inflateSync(data) : data })
  }
  const get = (id: string | undefined) => objects.get(id ?? '')
  const all = [...objects.values()]
  const catalog = all.find(one => /\/Type \/Catalog/.test(one.dict))?.dict ?? ''

  const fonts = new Map<string, Map<string, string>>()
  for (const { dict } of all) {
    for (const [, name = '', id] of /\/Font <<([^>]*)>>/.exec(dict)?.[1]?.matchAll(/\/(\w+) (\d+) 0 R/g) ?? []) {
      const map = get(/\/ToUnicode (\d+)/.exec(get(id)?.dict ?? '')?.[1])?.stream?.toString('latin1') ?? ''
      fonts.set(name, toUnicode(map))
    }
  }
  const descriptors = all.filter(one => /\/Type \/FontDescriptor/.test(one.dict))
  const tags = [...objects].filter(([, one]) => /\/S \/\w+/.test(one.dict) && /\/(P|K) /.test(one.dict)).sort(([a], [b]) => Number(a) - Number(b)).map(([, one]) => /\/S \/(\w+)/.exec(one.dict)?.[1] ?? '')
  const contents = all.filter(one => one.stream && /\bBT\b/.test(one.stream.toString('latin1'))).map(one => one.stream?.toString('latin1') ?? '')
  const metadata = all.map(one => one.stream?.toString('utf8') ?? '').find(text => text.includes('xmpmeta')) ?? ''
  return {
    text: contents.map(content => drawnText(content, fonts)).join('\n'),
    tags,
    marked: /\/Marked true/.test(catalog + (get(/\/MarkInfo (\d+)/.exec(catalog)?.[1])?.dict ?? '')),
    language: /\/Lang \(([^)]*)\)/.exec(catalog)?.[1] ?? null,
    showsTitle: /\/DisplayDocTitle true/.test(catalog + (get(/\/ViewerPreferences (\d+)/.exec(catalog)?.[1])?.dict ?? '')),
    title: /<dc:title>[^]*?<rdf:li[^>]*>([^<]*)</.exec(metadata)?.[1] ?? null,
    universal: /<pdfuaid:part>1</.test(metadata),
    fontsEmbedded: descriptors.length > 0 && descriptors.every(one => /\/FontFile2 /.test(one.dict)),
  }
}

/** A font's map from glyph codes to text: ranges of one code each or of an array (ISO 32000-1, 9.10.3). */
function toUnicode(map: string): Map<string, string> {
  const codes = new Map<string, string>()
  const text = (hex: string) => Buffer.from(hex, 'hex').swap16().toString('utf16le')
  for (const [, first = '', , list = ''] of map.matchAll(/<([0-9a-f]{4})> <([0-9a-f]{4})> \[([^\]]*)\]/gi)) {
    [...list.matchAll(/<([0-9a-f]+)>/gi)].forEach(([, to = ''], at) => codes.set((Number.parseInt(first, 16) + at).toString(16).padStart(4, '0'), text(to)))
  }
  return codes
}

function drawnText(content: string, fonts: ReadonlyMap<string, ReadonlyMap<string, string>>): string {
  const lines: string[] = []
  for (const [block] of content.matchAll(/\bBT\b[^]*?\bET\b/g)) {
    let font: ReadonlyMap<string, string> | undefined
    let line = ''
    for (const [, name, array] of block.matchAll(/\/(F\d+) [\d.]+ Tf|\[([^\]]*)\] TJ/g)) {
      if (name) font = fonts.get(name)
      for (const [, hex = ''] of array?.matchAll(/<([0-9a-f]+)>/gi) ?? []) for (const code of hex.toLowerCase().match(/.{4}/g) ?? []) line += font?.get(code) ?? '\uFFFD'
    }
    lines.push(line.trim())
  }
  return lines.join('\n')
}
