import { light } from '../../assets/tokens'

/** A film of ours before it is drawn: what a moment looks like, as the inside of an SVG of `width` by `height`. */
export interface Scene { name: string, seconds: number, draw: (second: number) => string }

export const width = 960
export const height = 540
export const framesASecond = 12

export const ink = light.ink
export const soft = light['iron-mid']
export const blue = light.layout
export const red = light.outside
export const green = light.inside

/** How far between two moments, 0 before the first and 1 after the second, begun and ended gently. */
export function between(second: number, from: number, to: number): number {
  const share = Math.min(1, Math.max(0, (second - from) / (to - from)))
  return share * share * (3 - 2 * share)
}

/** What is there from one moment to another, come and gone within a third of a second. */
export function during(second: number, from: number, to: number, drawing: string): string {
  const opacity = Math.min(between(second, from, from + 0.35), 1 - between(second, to - 0.35, to))
  return opacity <= 0 ? '' : `<g opacity="${opacity.toFixed(3)}">${drawing}</g>`
}

export function text(x: number, y: number, words: string, { size = 30, fill = ink, anchor = 'start', weight = 500 }: { size?: number, fill?: string, anchor?: 'start' | 'middle' | 'end', weight?: number } = {}): string {
  return `<text x="${x}" y="${y}" font-size="${size}" fill="${fill}" text-anchor="${anchor}" font-weight="${weight}">${words.replaceAll('&', '&amp;').replaceAll('<', '&lt;')}</text>`
}

/** Iron cut through: hatched, edged. */
export function iron(path: string): string {
  return `<path d="${path}" fill="url(#hatch)" stroke="${ink}" stroke-width="3" stroke-linejoin="round"/>`
}

/** A moment as a whole drawing, with the film's name along its top. */
export function frame(title: string, drawing: string): string {
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}" font-family="Archivo Variable">
<defs><pattern id="hatch" width="12" height="12" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><rect width="12" height="12" fill="#e9edea"/><path d="M0 0V12" stroke="#aeb6b3" stroke-width="2.4"/></pattern></defs>
<rect width="${width}" height="${height}" fill="${light.paper}"/>
${drawing}
<rect width="${width}" height="56" fill="${light['layout-deep']}"/>${text(28, 38, title, { size: 27, fill: '#ffffff', weight: 650 })}</svg>`
}
