/** Every colour of the product, once for each theme. Contrast is held to WCAG 2.2 AA by tests/meta/contrast.test.ts. */
export type ColourName =
  | 'ink' | 'iron' | 'iron-mid' | 'edge' | 'line' | 'line-soft' | 'machined' | 'paper'
  | 'layout' | 'layout-deep' | 'layout-wash' | 'layout-fill' | 'bar-ink'
  | 'inside' | 'inside-wash' | 'close' | 'close-wash' | 'outside' | 'outside-wash' | 'outside-fill' | 'on-fill'
  | 'band' | 'band-hatch' | 'band-soft' | 'tape' | 'tape-ink' | 'hazard' | 'hazard-edge' | 'curve-b' | 'curve-c'

/** Daylight, and print. */
export const light: Record<ColourName, string> = {
  'ink': '#1b2023',
  'iron': '#3a4247',
  'iron-mid': '#58616a',
  'edge': '#7a8480',
  'line': '#d3d8d5',
  'line-soft': '#e4e8e5',
  'machined': '#eef1ee',
  'paper': '#fcfcfa',
  'layout': '#1f3f8f',
  'layout-deep': '#14285e',
  'layout-wash': '#e7ecf8',
  'layout-fill': '#1f3f8f',
  'bar-ink': '#c4cfee',
  'inside': '#146650',
  'inside-wash': '#e1f1ea',
  'close': '#8a5705',
  'close-wash': '#fbf0da',
  'outside': '#ac231a',
  'outside-wash': '#fbe6e3',
  'outside-fill': '#b0261c',
  'on-fill': '#ffffff',
  'band': '#cfe5da',
  'band-hatch': '#7fae98',
  'band-soft': '#f2e2bd',
  'tape': '#f2c230',
  'tape-ink': '#1b2023',
  'hazard': '#fdf7e6',
  'hazard-edge': '#c99a2e',
  'curve-b': '#82296f',
  'curve-c': '#0d6c7d',
}

/** A dim shop, or a phone at ten in the evening: ground almost as dark as the iron, states lifted rather than inverted. */
export const dark: Record<ColourName, string> = {
  'ink': '#e8ecea',
  'iron': '#c6cecb',
  'iron-mid': '#a1abab',
  'edge': '#7d888b',
  'line': '#394146',
  'line-soft': '#2b3236',
  'machined': '#14181a',
  'paper': '#1d2326',
  'layout': '#a5b9f7',
  'layout-deep': '#101c40',
  'layout-wash': '#222d4d',
  'layout-fill': '#3c5cb8',
  'bar-ink': '#b9c6ec',
  'inside': '#76d2b3',
  'inside-wash': '#18362c',
  'close': '#ebba5a',
  'close-wash': '#3a2d12',
  'outside': '#ff9f93',
  'outside-wash': '#44221e',
  'outside-fill': '#bb3328',
  'on-fill': '#ffffff',
  'band': '#24503f',
  'band-hatch': '#4f9b7d',
  'band-soft': '#4d3d18',
  'tape': '#f2c230',
  'tape-ink': '#14181a',
  'hazard': '#2a2412',
  'hazard-edge': '#8a6d1d',
  'curve-b': '#e39fda',
  'curve-c': '#76cfdc',
}

/** "#1b2023" as "27 32 35", the form that lets one colour be used at any opacity. */
export function toChannels(hex: string): string {
  return [1, 3, 5].map(at => Number.parseInt(hex.slice(at, at + 2), 16)).join(' ')
}
