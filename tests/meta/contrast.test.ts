import { describe, expect, it } from 'vitest'
import { type ColourName, dark, light } from '../../assets/tokens.ts'

/** Relative luminance and contrast ratio. Source: WCAG 2.2, definitions of "relative luminance" and "contrast ratio" (from memory). */
function luminance(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
    const part = Number.parseInt(hex.slice(at, at + 2), 16) / 255
    return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue
}
function contrast(one: string, other: string): number {
  const [high = 0, low = 0] = [luminance(one), luminance(other)].sort((a, b) => b - a)
  return (high + 0.05) / (low + 0.05)
}

/** What is written on what: at least 4.5 to 1 (success criterion 1.4.3). */
const written: [ColourName, ColourName[]][] = [
  ['ink', ['machined', 'paper', 'layout-wash', 'hazard', 'outside-wash', 'close-wash', 'inside-wash', 'band', 'band-soft']],
  ['iron', ['machined', 'paper', 'layout-wash', 'hazard', 'outside-wash']],
  ['iron-mid', ['machined', 'paper', 'layout-wash', 'hazard']],
  ['layout', ['machined', 'paper', 'layout-wash']],
  ['inside', ['paper', 'inside-wash', 'machined']],
  ['close', ['paper', 'close-wash', 'machined']],
  ['outside', ['paper', 'outside-wash', 'machined']],
  ['on-fill', ['layout-fill', 'outside-fill', 'layout-deep']],
  ['bar-ink', ['layout-deep']],
  ['paper', ['iron']],
]
/** What is only drawn, and has to be found: at least 3 to 1 (success criterion 1.4.11). */
const drawn: [ColourName, ColourName[]][] = [
  ['edge', ['paper', 'machined']],
  ['inside', ['band', 'band-soft']],
  ['close', ['band', 'band-soft']],
  ['outside', ['band', 'band-soft']],
  ['curve-b', ['paper']],
  ['curve-c', ['paper']],
  ['tape', ['tape-ink']],
]

describe.each([['light', light], ['dark', dark]] as const)('colours, %s', (_, theme) => {
  it.each(written.flatMap(([on, grounds]) => grounds.map(ground => [on, ground] as const)))('%s can be read on %s', (on, ground) => {
    expect(contrast(theme[on], theme[ground])).toBeGreaterThanOrEqual(4.5)
  })
  it.each(drawn.flatMap(([on, grounds]) => grounds.map(ground => [on, ground] as const)))('%s can be found on %s', (on, ground) => {
    expect(contrast(theme[on], theme[ground])).toBeGreaterThanOrEqual(3)
  })
})

describe('contrast', () => {
  it('is 21 between black and white', () => {
    // WCAG 2.2: "contrast ratios can range from 1 to 21".
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 6)
  })
})
