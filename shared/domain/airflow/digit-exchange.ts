/**
 * The reading as written with two neighbouring digits exchanged, if that lands close to what the curve expects; else null.
 *
 * Never a repair: what it finds is shown as a question ("look in the notebook"). `written` is kept as text because exchanging
 * digits is about what a hand wrote, "78.6" for "87.6".
 *
 * Units: those of the sheet, all three alike.
 * Source: handbook 4.4.
 *
 * @throws {RangeError} when the expectation is not above zero or the tolerance is negative
 * @example
 * digitExchange('78.6', 87.9, 1.2) // => '87.6'
 */
export function digitExchange(written: string, expected: number, tolerance: number): string | null {
  if (!(expected > 0) || !(tolerance >= 0)) throw new RangeError('digitExchange requires an expectation above zero and a tolerance')
  let best: { text: string, distance: number } | null = null
  const digits = [...written.matchAll(/\d/g)].map(match => match.index)
  digits.forEach((at, i) => {
    const next = digits[i + 1]
    if (next === undefined || written[at] === written[next]) return
    const letters = [...written]
    letters[at] = written[next] as string
    letters[next] = written[at] as string
    const text = letters.join('')
    const distance = Math.abs(Number(text.replace(',', '.')) - expected)
    if (distance <= tolerance && (best === null || distance < best.distance)) best = { text, distance }
  })
  return (best as { text: string } | null)?.text ?? null
}
