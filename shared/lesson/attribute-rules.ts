import { isLessonLink } from './lesson-link'

/** Says what is wrong with a value in words that follow the attribute's name, or null. */
type Rule = (value: unknown) => string | null

const where = (good: (value: unknown) => boolean, says: string): Rule => value => good(value) ? null : says
const nothing = where(value => value === null, 'cannot be set in a lesson')
const isText = (value: unknown, max: number): value is string => typeof value === 'string' && value.length <= max && value.isWellFormed() && !value.includes('\0')
const text = (max: number) => where(value => isText(value, max), `is text of at most ${max} characters`)
const whole = (least: number, most: number) => where(value => Number.isInteger(value) && Number(value) >= least && Number(value) <= most, `is a whole number from ${least} to ${most}`)
const oneOf = (...values: unknown[]) => where(value => values.includes(value), `is one of ${values.filter(one => one !== null).join(', ')}`)
const matches = (pattern: RegExp, says: string) => where(value => typeof value === 'string' && pattern.test(value), says)
const orNull = (rule: Rule): Rule => value => value === null ? null : rule(value)

const uuid = matches(/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/, 'is the id of something in the media list')
/** A day of film. */
const mostSeconds = 86_400
const seconds = where(value => typeof value === 'number' && value >= 0 && value <= mostSeconds, 'is a number of seconds, 0 or more')
const widths = where(value => Array.isArray(value) && value.length <= 20 && value.every(one => Number.isInteger(one) && one >= 0 && one <= 5000), 'is a list of widths')
const cell = { colspan: whole(1, 20), rowspan: whole(1, 200), colwidth: orNull(widths), align: oneOf(null, 'left', 'center', 'right') }

/** Every attribute a node or mark of a lesson may have, and what it may hold; what is not named here may have none. */
export const attributeRules: Readonly<Record<string, Readonly<Record<string, Rule>>>> = {
  heading: { level: oneOf(2, 3, 4), id: orNull(matches(/^[a-z0-9-]{1,120}$/, 'is small letters, digits and hyphens')) },
  orderedList: { start: whole(0, 9999), type: oneOf(null, '1', 'a', 'A', 'i', 'I') },
  tableCell: cell,
  tableHeader: cell,
  link: { href: where(value => typeof value === 'string' && isLessonLink(value), 'is a web address, a mail address or a lesson'), target: nothing, rel: nothing, class: nothing, title: nothing },
  figure: { asset: orNull(uuid), drawing: orNull(matches(/^[a-z0-9-]{1,80}$/, 'is the name of a drawing')), alt: text(600), caption: text(600) },
  limit: { criterion: matches(/^[A-Z]{1,3}-\d{2}[a-z]?$/, 'is the id of a criterion, as W-01') },
  step: { cannotBeUndone: where(value => typeof value === 'boolean', 'is true or false') },
  clip: { asset: uuid, start: seconds, end: orNull(seconds), caption: text(600) },
}

/** What the attributes of a node say together, each already right by itself. */
export const togetherRules: Readonly<Record<string, (attrs: Readonly<Record<string, unknown>>) => string | null>> = {
  figure: ({ asset, drawing }) => asset !== null && drawing !== null ? 'A figure shows an upload or a drawing, not both.' : null,
  clip: ({ start, end }) => typeof end === 'number' && end <= Number(start) ? 'A clip ends after it starts.' : null,
}
