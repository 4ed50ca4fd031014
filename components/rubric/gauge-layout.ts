/** Band a reading is judged against, as the gauge draws it. Ends as in `CriterionResult['band']`. */
export interface GaugeBand { lo: number | null, hi: number | null, loKind: string, hiKind: string, softLo: number | null, softHi: number | null }

export interface GaugeInput {
  value: number | null
  /** k = 2, in the unit of the value; null where the quantity has none. */
  expandedUncertainty: number | null
  band: GaugeBand | null
  /** Only a must has to clear a no-return end by its doubt. */
  must: boolean
}

export interface Span { from: number, to: number }
/** Everything the gauge draws, in the units of the drawing. */
export interface GaugeLayout {
  ticks: { x: number, value: number, long: boolean }[]
  band: Span | null
  soft: Span[]
  /** Parts of the band that are accepted only when the doubt is zero. */
  guarded: Span[]
  limits: { x: number, text: string, at: 'lo' | 'hi' }[]
  reading: { x: number, doubt: Span | null, off: 'below' | 'above' | null } | null
}

/** How many widths of what matters an outlier may stretch the rule before it is drawn as off its end. */
const stretch = 1.6

/**
 * Lays the gauge out on a rule `width` long with `pad` kept clear at both ends.
 *
 * The rule shows the accept band, the soft band and the reading with its doubt, with a little on either side. A reading so far out that the band
 * would shrink to nothing does not stretch the rule: it is drawn at the end, as an arrow.
 * A missing end (no upper limit) lets the band run off the rule.
 *
 * Units: those of the reading throughout.
 *
 * @throws {RangeError} when a number given is not finite
 */
export function layoutGauge(input: GaugeInput, width: number, pad: number): GaugeLayout {
  const { value, band } = input
  const doubt = input.expandedUncertainty ?? 0
  for (const number of [value, doubt, band?.lo, band?.hi, band?.softLo, band?.softHi]) {
    if (number !== null && number !== undefined && !Number.isFinite(number)) throw new RangeError('layoutGauge requires finite numbers')
  }

  const { from, to, step } = pickRule(input)
  const x = (at: number) => pad + (Math.min(to, Math.max(from, at)) - from) / (to - from) * (width - 2 * pad)
  const span = (low: number, high: number): Span => ({ from: x(low), to: x(high) })
  const drawn = (low: number, high: number): Span[] => high > low && high > from && low < to ? [span(low, high)] : []

  const lo = band?.lo ?? null
  const hi = band?.hi ?? null
  const layout: GaugeLayout = { ticks: [], band: null, soft: [], guarded: [], limits: [], reading: null }

  // Without the + 0 a rule that starts at nought would start at minus nought.
  const first = Math.ceil(from / step - 1e-9) + 0
  const last = Math.floor(to / step + 1e-9)
  for (let at = first; at <= last; at++) layout.ticks.push({ x: x(at * step), value: at * step, long: at % 5 === 0 })

  if (band && (lo !== null || hi !== null)) {
    layout.band = span(lo ?? from, hi ?? to)
    if (band.softLo !== null && lo !== null) layout.soft.push(...drawn(band.softLo, Math.min(band.softHi ?? lo, lo)))
    if (band.softHi !== null && hi !== null) layout.soft.push(...drawn(Math.max(band.softLo ?? hi, hi), band.softHi))
    if (input.must && doubt > 0) {
      if (lo !== null && band.loKind === 'no-return') layout.guarded.push(...drawn(lo, Math.min(lo + doubt, hi ?? Infinity)))
      if (hi !== null && band.hiKind === 'no-return') layout.guarded.push(...drawn(Math.max(hi - doubt, lo ?? -Infinity), hi))
    }
    if (lo !== null) layout.limits.push({ x: x(lo), text: writeLimit(lo), at: 'lo' })
    if (hi !== null && hi !== lo) layout.limits.push({ x: x(hi), text: writeLimit(hi), at: 'hi' })
  }

  if (value !== null) {
    const off = value < from ? 'below' : value > to ? 'above' : null
    layout.reading = { x: x(value), doubt: doubt > 0 && !off ? span(value - doubt, value + doubt) : null, off }
  }
  return layout
}

/** The stretch of rule to show, and the step between its short ticks. */
function pickRule({ value, expandedUncertainty, band }: GaugeInput): { from: number, to: number, step: number } {
  const doubt = expandedUncertainty ?? 0
  const limits = [band?.lo, band?.hi, band?.softLo, band?.softHi].filter(at => at !== null && at !== undefined)
  let low = Math.min(...limits, ...(limits.length || value === null ? [] : [value - doubt]))
  let high = Math.max(...limits, ...(limits.length || value === null ? [] : [value + doubt]))
  if (!Number.isFinite(low)) [low, high] = [0, 1]

  // One limit alone says nothing of scale: then the doubt does, or a fifth of the limit itself.
  const core = high - low || Math.max(4 * doubt, Math.abs(high) * 0.2) || 1
  if (value !== null) {
    low = Math.min(low, Math.max(value - doubt, low - core * stretch))
    high = Math.max(high, Math.min(value + doubt, high + core * stretch))
  }
  // Room for a band with no end to be seen to run on.
  if (band && band.hi === null) high = Math.max(high + core * 0.35, low + core * 1.35)
  if (band && band.lo === null) low = Math.min(low - core * 0.35, high - core * 1.35)
  const rim = (high - low || core) * 0.14
  // Nothing is below the nought of a spread, a count or a leak.
  const floored = band?.lo === 0 && band.loKind === 'natural' && (value === null || value >= 0)
  low = floored ? 0 : low - rim
  high += rim

  const step = tickStep((high - low) / 22)
  return { from: floored ? 0 : Math.floor(low / step) * step, to: Math.ceil(high / step) * step, step }
}

/** The next of 1, 2, 5, 10 ... above. */
function tickStep(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least))
  return ([1, 2, 5].find(step => step * power >= least * 0.999) ?? 10) * power
}

function writeLimit(at: number): string {
  return String(Number(at.toFixed(4))).replace('-', '\u2212')
}
