import type { Side } from '../../units/port'
import { readSide } from './read-header-value'
import type { ColumnQuantity, SheetUnit } from './sheet-reading'
import { findUnitWord, type UnitKind, withoutUnits } from './unit-words'

/** What a column heading says. */
export interface Heading {
  quantity: ColumnQuantity
  unit: SheetUnit | null
  run: string | null
  cylinder: number | null
  side: Side | null
  /** A figure somebody worked out from the others, not a reading. */
  statistic: 'mean' | 'extreme' | null
  /** Of a flow: as the bench read it, or already brought to 28 inH2O; null when the heading does not say. */
  basis: 'raw' | 'at28' | null
  /** Of a flow: the heading says its air is standard air. */
  densityDone: boolean
  /** Pressure the heading of a flow names ("cfm at 10 inH2O"), with its unit; null when it names none. */
  pressure: { value: number, unit: SheetUnit } | null
}

/** Units each quantity can be in. */
export const unitKinds: Partial<Record<ColumnQuantity, UnitKind[]>> = {
  lift: ['length'],
  pressure: ['pressure'],
  flow: ['flow'],
  reading: ['ratio'],
  leak: ['ratio', 'flow'],
  plate: ['flow'],
  temperature: ['temperature'],
  barometer: ['pressure'],
  humidity: ['ratio'],
}

/**
 * What a heading means, its upper rows joined in front of it; null when it is empty or says nothing a bench would.
 */
export function readHeading(text: string): Heading | null {
  if (text === '') return null
  const words = withoutUnits(text)
  const cylinder = /\bc(?:yl(?:inder)?)?\.?\s*(?:no\.?\s*)?#?\s*(\d{1,2})\b/i.exec(words)
  const side = readSide(text, false)
  const runMatch = /\b(?:run|repeat|rep|set|set-up|setup|pass|trial|sweep|test)\.?\s*(?:no\.?\s*)?#?\s*(\d{1,2}|[a-c])\b/i.exec(words) ?? /\b(?:flow|q|reading|dp|p)\s*_?#?\s*(\d)(?=$|\s|[([])/i.exec(words) ?? /(?:^|\s)#(\d)\b/.exec(words)
  const base = {
    run: runMatch?.[1]?.toLowerCase() ?? null,
    cylinder: cylinder ? Number(cylinder[1]) : null,
    side,
    statistic: /\b(?:mean|average|avg|ave)\b|\u00F8|\bx\u0304/i.test(words) ? 'mean' as const : /\b(?:min(?:imum)?|max(?:imum)?|low(?:est)?|high(?:est)?)\b/i.test(words) ? 'extreme' as const : null,
    densityDone: /\bs(?:td|tandard|cfm)\b|\bdensity\s+corr|\bnorm(?:al)?\b/i.test(text),
    pressure: null,
    basis: null,
  }
  const make = (quantity: ColumnQuantity, more: Partial<Heading> = {}): Heading => ({ ...base, quantity, unit: unitOf(quantity, text), ...more })

  if (/^\W*(?:notes?|remarks?|comments?)\b/i.test(text)) return make('note')
  if (/^\W*(?:date|day|datum)\b/i.test(text)) return make('date')
  if (/^\W*(?:#|nos?\.?|nr\.?|row|point|pt\.?|step|line|time|clock)\W*$/i.test(text)) return make('other')
  if (/^\W*(?:run|repeat|rep|set|set-?up|pass|sweep|trial)\W*(?:no\.?|#|number)?\W*$/i.test(text)) return make('run')
  if (/^\W*cyl(?:inder)?s?\W*(?:no\.?|#|number)?\W*$/i.test(text)) return make('cylinder')
  if (/^\W*(?:side|port|valve|port side|in\/ex)\W*$/i.test(text)) return make('side')
  if (/\bcd\b|\bcf\b|\bcoeff?\w*|\bvelocity\b|\bareas?\b|\bgain\b|\bchange\b|\bbaseline\b|\bprevious\b|\busual\b|\btarget\b|\bcorr(?:ection)?\s+factor\b|\bfactor\b|\bsd\b|\bstd\.?\s*dev|\bspread\b|\btotal\b|\bsum\b|\bdiff\w*\b|\bratio\b/i.test(words)) return make('other')
  if (/\bplate\b/i.test(text)) return make('plate')
  if (/\bleak\w*|\bshut\b|\bclosed\b/i.test(text)) return make('leak')
  // "Lift" before the ratios: "Lift, thousandths of an inch" is a lift.
  if (/\blifts?\b|\bvalve\s+(?:open\w*|travel|position)|\bopening\b|^\W*l\s*\/\s*d\b/i.test(text)) return make('lift')
  if (/\bbaro\w*|\batmos\w*/i.test(text)) return make('barometer')
  if (/\bhumid\w*|\br\.?h\b/i.test(text)) return make('humidity')
  if (/\btemp\w*|\bambient\b/i.test(words) && !/\bflow\b/i.test(words)) return make('temperature')
  const ratio = findUnitWord(text, 'ratio')
  if (ratio) return make('reading')
  if (/\b(?:scale|range)\b/i.test(words) && findUnitWord(text, 'flow') === null) return make('range')

  const flowUnit = findUnitWord(text, 'flow')
  const flowWord = /\bflow\b|^\W*q\w?\b|\bairflow\b|\bvolume\b/i.test(words)
  if (flowUnit || flowWord) {
    const behind = text.replace(/.*?(?:\bat\b|@|\bto\b)/i, '')
    const unit = findUnitWord(behind, 'pressure')?.unit
    const figure = /(\d+(?:[.,]\d+)?)/.exec(behind)
    const names28 = /(?:\bat\b|@|\bto\b|\bcorr\w*|\bq)\s*_?28\b/i.test(text)
    const named = unit && figure && /\bat\b|@|\bto\b/i.test(text) ? { value: Number((figure[1] ?? '').replace(',', '.')), unit } : null
    const basis = names28 || /\bcorr(?:ected)?\b|\breduced\b/i.test(words) ? 'at28' : /\bas\s+read\b|\braw\b|\bactual\b|\bmeasured\b|\bobserved\b|\bat\s+test\b|\bindicated\b/i.test(words) ? 'raw' : null
    return make('flow', { basis: /\b(?:un|not\s+)corr/i.test(words) ? 'raw' : basis, pressure: named })
  }
  if (findUnitWord(text, 'pressure') || /\bd\.?p\.?\b|\bpress\w*|\bdepression\b|\bvacuum\b|\bmanometer\b|\btest\s+p\b|^\W*p\W*$/i.test(words)) return make('pressure')
  if (/^\W*(?:reading|meter|value|gauge|indicated)\b/i.test(words)) return make('flow')
  if (base.statistic) return make('other')
  if (base.cylinder !== null || base.run !== null || (side && words.trim().split(/\s+/).length <= 3)) return make('flow')
  return null
}

/** The unit of a heading for what it holds; null when it names none. */
export function unitOf(quantity: ColumnQuantity, text: string): SheetUnit | null {
  for (const kind of unitKinds[quantity] ?? []) {
    const found = findUnitWord(text, kind)
    if (found) return found.unit
  }
  return null
}

/** True where a cell holds a unit and nothing else, as in a row of units under the headings. */
export function isUnitCell(text: string): boolean {
  if (text === '' || text.length > 24) return false
  const kinds: UnitKind[] = ['pressure', 'flow', 'length', 'ratio', 'temperature']
  return kinds.some((kind) => {
    const found = findUnitWord(text, kind)
    return found !== null && /^[\s()[\].]*$/.test(text.slice(0, found.start) + text.slice(found.end))
  })
}
