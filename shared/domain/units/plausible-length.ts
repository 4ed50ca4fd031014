/** Whether a length can be what it is said to be, and if not, the sentence to show. */
export type Plausibility = { plausible: true } | { plausible: false, message: string }

/**
 * Whether a length lies within a factor of four of the casting card's own size for that quantity.
 *
 * Not a judgement of the work, only of the unit: a throat of 41 typed with inches chosen is 1041 mm, and no cut makes a
 * 36.5 mm throat four times as large. A factor of 25.4 (mm for inch) and of 1000 (thou for inch) always falls outside.
 *
 * Units: mm.
 * Source: school design value (factor 4).
 *
 * @throws {RangeError} when the nominal is not above zero or the length is not finite
 */
export function plausibleLength(quantity: string, lengthMm: number, nominalMm: number): Plausibility {
  if (!Number.isFinite(lengthMm)) throw new RangeError('plausibleLength requires a finite length')
  if (!(nominalMm > 0) || !Number.isFinite(nominalMm)) throw new RangeError('plausibleLength requires a nominal above zero')
  if (lengthMm >= nominalMm / 4 && lengthMm <= nominalMm * 4) return { plausible: true }
  return {
    plausible: false,
    message: `${shortNumber(lengthMm)} mm (${shortNumber(lengthMm / 25.4)} in) cannot be the ${quantity}: the card says about ${shortNumber(nominalMm)} mm (${shortNumber(nominalMm / 25.4)} in). Check the unit.`,
  }
}

function shortNumber(value: number): string {
  return String(Number(value.toPrecision(4)))
}
