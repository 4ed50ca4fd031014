import { z } from 'zod'
import { cleanText, someText } from './text'

export interface ConsentView {
  version: number
  clauses: { code: string, title: string, text: string }[]
  choices: { code: string, text: string, allowed: boolean }[]
  /** Null when this person has not signed a version that still stands. */
  signed: { version: number, at: string, as: string } | null
  /** Signed once, and a safety clause changed since. */
  askedAgain: boolean
}
export const consentInput = z.object({ version: z.number().int().min(1), ticks: z.array(z.string().max(40)).max(40), signedAs: someText(120), under18: z.boolean(), guardian: cleanText(120).optional(), firstAid: cleanText(2000).default(''), choices: z.record(z.boolean()).default({}) }).strict()
export type ConsentInput = z.infer<typeof consentInput>
export const choiceInput = z.object({ code: z.string().max(40), allowed: z.boolean() }).strict()
export const consentTextInput = z.object({ after: z.number().int().min(1), clauses: z.array(z.object({ code: z.string().regex(/^[a-z0-9-]{1,40}$/), title: someText(120), text: someText(3000), safety: z.boolean() }).strict()).min(1).max(40), choices: z.array(z.object({ code: z.string().regex(/^[a-z0-9-]{1,40}$/), text: someText(500) }).strict()).max(20) }).strict()

export interface ClearanceRow { person: { id: string, name: string }, cohort: string | null, consent: boolean, clearances: { id: string, tool: string, until: string, lapsed: boolean, givenBy: string }[], missing: string[] }
export const clearanceInput = z.object({ person: z.string().uuid(), tool: someText(40), until: z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'is not a date') }).strict()
