import { z } from 'zod'
import { date } from './places'
import { cleanText, someText } from './text'

/** Safety form, sharing choices and clearances: what students and the safety officer send and see. Instants are ISO, dates YYYY-MM-DD. */

/** Tools and processes the shop clears people for, by the codes the rubric names. */
export const tools = ['die-grinder', 'right-angle-grinder', 'bead-cabinet', 'hot-tank', 'flow-bench', 'pressure-rig', 'saw'] as const
export type Tool = (typeof tools)[number]
/** The saw is for staff. */
export const staffTools: readonly Tool[] = ['saw']
/** "die grinder". */
export const toolName = (tool: string) => tool.replaceAll('-', ' ')

/**
 * Whether what a person signed still stands. `asked again`: signed once, and a safety clause changed since.
 * Without it every stage with a tool is shut.
 */
export type ConsentState = 'signed' | 'asked again' | 'none'

export interface ConsentView {
  version: number
  clauses: { code: string, title: string, text: string }[]
  choices: { code: string, text: string, allowed: boolean }[]
  state: ConsentState
  /** The newest version this person signed, standing or not. */
  signed: { version: number, at: string, as: string, guardian: string | null } | null
  /** Clauses that changed since then; empty before the first time. */
  changed: string[]
  /** One's own; besides only the safety officer reads them. */
  firstAid: string
  bootSize: string
  /** What one may use, a tool each. */
  clearances: ClearanceOne[]
}

const firstAid = cleanText(2000)
const bootSize = z.string().trim().regex(/^(\d{1,2}([.,]5)?)?$/, 'a size such as 9 or 42.5').transform(size => size.replace(',', '.'))
const code = z.string().regex(/^[a-z0-9-]{1,40}$/)

export const consentInput = z.object({
  version: z.number().int().min(1),
  /** Codes of the clauses, every one. */
  ticks: z.array(code).max(40),
  signedAs: someText(120),
  under18: z.boolean(),
  guardian: cleanText(120).default(''),
  firstAid: firstAid.default(''),
  bootSize: bootSize.default(''),
  choices: z.record(code, z.boolean()).default({}),
}).strict().superRefine((given, context) => {
  if (given.under18 && given.guardian === '') context.addIssue({ code: 'custom', path: ['guardian'], message: 'Under 18 a guardian signs too: write the name.' })
  if (!given.under18 && given.guardian !== '') context.addIssue({ code: 'custom', path: ['guardian'], message: 'A guardian signs only for somebody under 18.' })
})
export type ConsentInput = z.output<typeof consentInput>
export const choiceInput = z.object({ code, allowed: z.boolean() }).strict()
export type ChoiceInput = z.infer<typeof choiceInput>
export const safetyNoteInput = z.object({ firstAid, bootSize }).strict()
export type SafetyNoteInput = z.output<typeof safetyNoteInput>

export interface ConsentTextView { version: number, clauses: { code: string, title: string, text: string, safety: boolean }[], choices: { code: string, text: string }[], standsFrom: number, savedAt: string, savedBy: string | null }
/** `after` is the version that was changed; 0 when there is none yet. */
export const consentTextInput = z.object({
  after: z.number().int().min(0),
  clauses: z.array(z.object({ code, title: someText(120), text: someText(3000), safety: z.boolean() }).strict()).min(1).max(40),
  choices: z.array(z.object({ code, text: someText(500) }).strict()).max(20),
}).strict().superRefine(({ clauses, choices }, context) => {
  for (const [name, codes] of [['clauses', clauses.map(one => one.code)], ['choices', choices.map(one => one.code)]] as const) {
    codes.forEach((one, at) => codes.indexOf(one) !== at && context.addIssue({ code: 'custom', path: [name, at, 'code'], message: 'is there twice' }))
  }
})
/** Whether two versions say the same about safety, in whatever order: if not, everybody is asked again. */
export function sameSafetyClauses(one: readonly { code: string, title: string, text: string, safety: boolean }[], other: typeof one): boolean {
  const safety = (clauses: typeof one) => JSON.stringify(clauses.filter(clause => clause.safety).map(({ code: name, title, text }) => [name, title, text]).sort())
  return safety(one) === safety(other)
}
export type ConsentTextInput = z.infer<typeof consentTextInput>

export interface ClearanceOne { id: string, tool: string, from: string, until: string, lapsed: boolean, givenBy: string }
/** A person and what they may use today. `missing`: what the route asks for and they lack; of staff nothing is asked. */
export interface ClearanceRow { id: string, name: string, cohort: string | null, staff: boolean, consent: ConsentState, clearances: ClearanceOne[], missing: string[] }
export interface PersonSafetyView extends ClearanceRow {
  /** The school's now, ISO: last days are counted from it. */
  today: string
  /** Every clearance there ever was, newest first. */
  history: (ClearanceOne & { withdrawnAt: string | null })[]
  signed: { version: number, at: string, as: string, guardian: string | null }[]
  sharing: { code: string, text: string, allowed: boolean, at: string | null }[]
  bootSize: string
  /** Null to anybody but the safety officer. */
  firstAid: string | null
}
export const clearanceInput = z.object({ person: z.string().uuid(), tool: z.enum(tools), until: date }).strict()
export type ClearanceInput = z.infer<typeof clearanceInput>
export const clearancesQuery = z.object({
  search: cleanText(100).optional(),
  /** Those who may stand at a bench now or soon, or everybody with an account. */
  who: z.enum(['current', 'everybody']).default('current'),
  lacking: z.enum(['any', 'consent', 'clearance']).default('any'),
  sort: z.enum(['name', 'expiry']).default('name'),
  after: z.string().max(400).optional(),
  limit: z.coerce.number().int().min(1).max(100).default(50),
})
export type ClearancesQuery = z.output<typeof clearancesQuery>
