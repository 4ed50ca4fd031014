import type { Criterion, CriterionState, FeedbackKey } from './criterion'
import type { Decision } from './decide'
import { spotInWords } from './words'

/** What a sentence may say of a result. */
export interface Sayable {
  state: CriterionState
  end: Decision['end']
  finding: string | null
  value: number | null
  expandedUncertainty: number | null
  /** Accept end the value was held against. */
  limit: number | null
  at: string | null
  /** Figures that win over those above. */
  fill: Record<string, string>
  /** The sentences of one side would be untrue here. */
  plain: boolean
}

/** First words on a stop for a wall or a leak (handbook 7). */
const stopWords = 'Pressure test before anything else. This estimate has a doubt; the metal may be worse.'
const wallOrLeak = new Set(['wall-thickness', 'guide-boss-width', 'pressure-drop'])

/** Quantities whose sign is part of what the sentence says; the others say the direction in words. */
const signed = new Set(['lift-zero', 'flow-gain', 'weighted-flow-gain', 'flow-change'])

/** Digits after the point, and the unit as a sentence writes it, by the rubric's unit. */
function figures(unit: string): { decimals: number, word: string } {
  const first = unit.split(' ')[0] ?? ''
  switch (first) {
    case 'mm': return { decimals: 2, word: 'mm' }
    case 'mm2': return { decimals: 0, word: 'mm2' }
    case 'cc': return { decimals: 2, word: 'cc' }
    case '%': return { decimals: 1, word: '%' }
    case 'kPa': return { decimals: 1, word: 'kPa' }
    case 'cfm': return { decimals: 1, word: 'cfm' }
    case 'ratio': case '-': return { decimals: 2, word: '' }
    case 'pH': return { decimals: 1, word: '' }
    default: return { decimals: 0, word: '' }
  }
}

/** What is said when no sentence of the library can be used whole. */
const plainWords: Record<'accept' | 'borderline' | 'reject', string> = {
  accept: 'Within the band.',
  borderline: 'Close, not settled.',
  reject: 'Outside the band.',
}

/**
 * The sentence proposed to the student for an assessed result.
 *
 * Chosen in this order: the one for the finding (rejectDigits), the one for the side (rejectLow), the plain one. Braces are filled
 * from the result. A text with a brace nobody can fill falls back to its first sentence without figures, then to what of it can be
 * filled whole, then to a plain word: an unfilled brace never leaves. The rubric's `examples` are never used.
 * On a stop for a wall or a leak the words of handbook 7 come first.
 *
 * Source: handbook 3.6 and 7.
 */
export function sentence(criterion: Criterion, said: Sayable): string {
  if (said.state !== 'accept' && said.state !== 'borderline' && said.state !== 'reject') throw new RangeError('sentence is for assessed results')
  const state = said.state
  const side = said.end === null || said.plain ? '' : said.end === 'low' ? 'Low' : 'High'
  const keys = [said.finding === null || said.plain ? '' : state + said.finding, side === '' ? '' : state + side, state].filter(key => key !== '')
  const template = keys.map(key => criterion.feedback[key as FeedbackKey]).find(text => text !== undefined)
  const text = template === undefined ? plainWords[state] : filled(template, criterion.unit, figuresOf(criterion, said)) ?? plainWords[state]

  if (!criterion.safetyStop || !wallOrLeak.has(criterion.quantity) || state === 'accept') return text
  // The library's own sentence may say the same; it is said once, and first.
  const rest = text.replace(/Pressure test before anything else[.;]\s*(\w?)/g, (_, next: string) => next.toUpperCase()).trim()
  return `${stopWords} ${rest}`.trim()
}

function figuresOf(criterion: Criterion, said: Sayable): Record<string, string> {
  const { decimals } = figures(criterion.unit)
  const shown = (value: number): string => (signed.has(criterion.quantity) ? value : Math.abs(value)).toFixed(decimals).replace(/^-(0(\.0*)?)$/, '$1')
  return {
    ...(said.value === null ? {} : { value: shown(said.value), n: said.value.toFixed(0) }),
    ...(said.expandedUncertainty === null ? {} : { U: said.expandedUncertainty.toFixed(decimals) }),
    ...(said.limit === null ? {} : { limit: String(said.limit) }),
    ...(said.at === null ? {} : { where: spotInWords(said.at) }),
    ...Object.fromEntries(Object.entries(said.fill).filter(([, text]) => text !== '')),
  }
}

const brace = /\{(\w+)\}/g

/** The template with its braces filled; null when nothing of it can be said. */
function filled(template: string, unit: string, figuresByName: Record<string, string>): string | null {
  const whole = fill(template, unit, figuresByName)
  if (whole !== null) return whole
  const sentences = template.match(/[^.!?]+(?:[.!?](?!\s)[^.!?]*)*[.!?]*\s*/g)?.map(part => part.trim()).filter(part => part !== '') ?? []
  const withoutFigures = sentences.find(part => part.search(brace) === -1)
  if (withoutFigures !== undefined) return capitalised(withoutFigures)
  const sayable = sentences.map(part => fill(part, unit, figuresByName)).filter((part): part is string => part !== null)
  return sayable.length === 0 ? null : capitalised(sayable.join(' '))
}

/** Every brace filled, or null. A value or limit that ends its phrase gets its unit; one followed by its unit does not get it twice. */
function fill(template: string, unit: string, figuresByName: Record<string, string>): string | null {
  const { word } = figures(unit)
  const names = [...template.matchAll(brace)].map(match => match[1] as string)
  if (names.some(name => figuresByName[name] === undefined)) return null
  return template.replaceAll(brace, (_, name: string, at: number) => {
    const figure = figuresByName[name] as string
    if (name === 'where' && /station $/.test(template.slice(0, at))) return figure.replace(/^station /, '')
    const after = template.slice(at + name.length + 2)
    const barePhrase = (name === 'value' || name === 'limit') && word !== '' && !/^ (?:mm2?|cc|%|kPa|cfm|points|sections|of)\b/.test(after) && !after.startsWith(' %')
    return barePhrase && /^-?[\d.]+$/.test(figure) ? `${figure} ${word}` : figure
  })
}

function capitalised(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}
