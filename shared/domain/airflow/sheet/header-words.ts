/** What a label of a sheet's header speaks of. `skip` is read by nobody, but ends whatever stood before it. */
export type HeaderField =
  | 'bench' | 'date' | 'operator' | 'head' | 'cylinder' | 'side' | 'stage' | 'valve' | 'stem' | 'seat' | 'land' | 'throat' | 'entry' | 'pipe'
  | 'pressure' | 'temperature' | 'barometer' | 'humidity' | 'density' | 'air' | 'leak' | 'plate' | 'plate-nominal' | 'plate-today' | 'plate-before' | 'plate-after'
  | 'full-scale' | 'basis' | 'lift-unit' | 'flow-unit' | 'skip'

/** Labels, the more particular first: where two begin at one spot the first in this list is taken. */
const words: [HeaderField, RegExp][] = [
  ['skip', /\bvalve\s+(?:no\.?|number|#|margin|back\w*|job|clearance)|\bmargin\b|\b(?:adapter|bench)\s+bore\b|\bcertificate\b|\bserial\b|\bform\b|\btime\b|\bsession\b|\bpage\b|\bsheet\s*(?:no\.?|#)|\bvalve\s+lift\b|\blift\s+(?:zero|zeroed)\b/i],
  ['skip', /\b(?:remarks?|notes?|comments?)\b/i],
  ['leak', /\b(?:closed|shut)[\s-]*valves?\s*(?:leak\w*|flow)?\b|\bvalves?\s+(?:closed|shut)\s*(?:leak\w*|flow)?\b|\bleak(?:age)?\b(?:\s*,?\s*\(?(?:with\s+)?valves?\s+(?:closed|shut)\)?)?/i],
  ['plate-nominal', /\b(?:(?:test|cal\w*|check|orifice)\s+)?plate\s*,?\s*\(?(?:nominal|nom\b\.?|stamped|should(?:\s+(?:be|read))?|certified|target)\)?/i],
  ['plate-before', /\b(?:(?:test|cal\w*|check|orifice)\s+)?plate\s*,?\s*\(?before\)?/i],
  ['plate-after', /\b(?:(?:test|cal\w*|check|orifice)\s+)?plate\s*,?\s*\(?after\)?/i],
  ['plate-today', /\b(?:(?:test|cal\w*|check|orifice)\s+)?plate\s*,?\s*\(?(?:today|now|reading|reads?|measured|actual|found|this day)\)?|\bplate\b(?=[^.;]*\btoday\b)(?![^.;]*\bnominal\b)/i],
  ['plate', /(?<!radius\s|end\s|entry\s)\b(?:(?:test|cal\w*|check|orifice)\s+)?plate\b/i],
  ['barometer', /\bbaro\w*(?:\s+pressure)?\b|\batmos\w*(?:\s+pressure)?\b|\b(?:ambient|air|room)\s+press\w*\b|\bqfe\b/i],
  ['temperature', /\b(?:(?:ambient|air|room|inlet|shop)\s+)?temp(?:erature)?\b\.?|\bambient\b(?!\s+(?:air|conditions|pressure|volume))(?=\W*(?:°|deg|c\b|f\b|k\b|\d))/i],
  ['humidity', /\b(?:rel(?:ative)?\.?\s+)?humidity\b|\br\.?\s?h\.?(?![a-z])|\bhumid\.?/i],
  ['density', /\b(?:air\s+)?density\b(?!\s*(?:corr|done|comp))|\brho\b|\u03C1/i],
  ['full-scale', /\bfull[\s-]*scales?\b|\branges?\s*(?:table|flows?|values?|in\b|\()|\bscales?\s*(?:table|in\b|\()|\branges\b|\bscales\b|\brange\b(?=\s*[:=]?\s*\d)/i],
  ['lift-unit', /\blifts?\s+(?:units?|in\b|given in)\b/i],
  ['flow-unit', /\bflows?\s+(?:units?|in\b|given in)/i],
  ['basis', /\bflow\s+(?:basis|figures?|values?|readings?|is|are|as|brought|corrected|given|stated|shown)\b|\bbasis\b|\bflows?\s*(?=[:=])|\bdensity\s+corr\w*|\bcorrected\b|\bcorrection\b/i],
  ['pressure', /\b(?:test|bench|flow|set|target)\s*(?:pressure|press\.?|depression|dp|p\b)|\bpressure\s*(?:drop|difference|target|set)?\b|\bdepression\b|\bdp\b|\btested?\s+at\b|\brun\s+at\b/i],
  ['seat', /\b(?:valve\s+)?seat\s+angle\b|\bvalve\s+angle\b/i],
  ['land', /\b(?:valve\s+)?(?:seat\s+)?land(?:\s+width)?\b|\b(?:valve\s+)?seat\s+width\b/i],
  ['stem', /\b(?:valve\s+)?stem\b(?:\s*(?:dia(?:meter)?|od|\u00F8)\b\.?)?/i],
  ['throat', /\b(?:port\s+|valve\s+)?throat\b(?:\s*(?:dia(?:meter)?|bore|id)\b\.?)?/i],
  ['valve', /\b(?:(?:intake|inlet|exhaust)\s+)?valve(?:\s+head)?\b(?!\s*(?:open|wide))(?:\s*(?:dia(?:meter)?|size|od)\b\.?)?|\bhead\s+dia(?:meter)?\b\.?/i],
  ['seat', /\bseat\b/i],
  ['entry', /\b(?:inlet\s+|intake\s+|port\s+)?entry\b(?:\s+(?:radius|guide|form))?|\binlet\s+(?:guide|radius)\b/i],
  ['pipe', /\b(?:exhaust\s+|ex\.?\s+)?(?:pipe|stub)\b/i],
  ['air', /\bair\b|\bconditions\b|\bweather\b|\bambient\b/i],
  ['date', /\bdated?\b|\bday\b|\bdatum\b/i],
  ['operator', /\boperator\b|\b(?:tested|run|done|taken|measured|read)\s+by\b|\bstudent\b|\bname\b|\btester\b|^by\b/i],
  ['cylinder', /\bcyl(?:inder)?s?\b\.?(?:\s*(?:no\b\.?|number|#))?/i],
  ['side', /\b(?:port|valve)?\s*side\b|^port\b(?!\s*\w)/i],
  ['stage', /\bstage\b|\bstate\b|\bstatus\b|\bcondition\b|\boperation\b/i],
  ['bench', /\b(?:flow\s*)?bench\b(?:\s*(?:name|id))?/i],
  ['head', /\b(?:head|part|casting|piece|job)\b\.?(?:\s*(?:no\b\.?|number|id|#|ref\b\.?))?/i],
]

const everyWord = words.map(([field, pattern]): [HeaderField, RegExp] => [field, new RegExp(pattern, 'gi')])

/** A label found in a text. */
export interface FoundLabel { field: HeaderField, start: number, end: number }

/** Every label of a text, left to right, none inside another. */
export function findLabels(text: string): FoundLabel[] {
  const found: FoundLabel[] = []
  // Plain numbers, the most of a sheet, hold no label.
  if (!/\p{L}/u.test(text)) return found
  for (const [field, pattern] of everyWord) {
    for (const match of text.matchAll(pattern)) {
      const [start, end] = [match.index, match.index + match[0].length]
      if (!found.some(other => start < other.end && end > other.start)) found.push({ field, start, end })
    }
  }
  return found.sort((a, b) => a.start - b.start)
}
