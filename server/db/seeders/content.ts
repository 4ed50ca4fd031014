import { readdirSync, readFileSync } from 'node:fs'
import matter from 'gray-matter'
import { z } from 'zod'
import type { CastingCard } from '../../../shared/domain/geometry/casting'
import type { Rubric } from '../../../shared/domain/rubric/criterion'

const folder = new URL('../../../content/', import.meta.url)
const json = (name: string): unknown => JSON.parse(readFileSync(new URL(`school/${name}`, folder), 'utf8'))

const date = z.string().regex(/^\d{4}-\d\d-\d\d$/)
const post = z.string()
const cohort = z.object({ code: z.string(), name: z.string(), start: date, end: date, pattern: z.string(), places: z.number().int() })

const scenarioShape = z.object({
  school: z.object({ name: z.string(), short: z.string(), strapline: z.string(), place: z.string(), currency: z.string(), timezone: z.string(), bench_places_per_cohort: z.number().int(), flow_benches: z.array(z.string()) }),
  staff: z.array(z.object({ name: z.string(), role: z.string(), signs: z.array(z.string()).default([]), posts: z.array(post).default([]), stands_in_for: z.array(post).default([]) })),
  sponsor: z.object({ organisation: z.string(), contact: z.string(), sponsors: z.array(z.string()) }),
  prices: z.object({ course_full: z.number(), place_deposit: z.number(), alumni_access_years_included: z.number().int(), sponsor_invoice_terms_days: z.number().int() }),
  cohorts: z.array(cohort),
  students: z.array(z.object({ name: z.string(), cohort: z.string(), head: z.string().nullable(), moved_to: z.string().optional() })),
  alumni: z.array(z.object({ name: z.string(), cohort: z.string() })),
})

const startShape = z.object({
  password: z.string(),
  earlierCohorts: z.array(cohort),
  students: z.record(z.object({ slot: z.number().int().optional(), firstCylinder: z.number().int(), second: z.object({ number: z.string(), firstCylinder: z.number().int(), receivedAt: z.string() }).optional() })),
  moved: z.record(z.object({ at: z.string(), slot: z.number().int(), depositPaidOn: date })),
  /** Balances that came late, and in what parts. */
  lateBalances: z.record(z.array(z.object({ on: date, minor: z.number().int() }))),
  orders: z.record(z.object({ number: z.string(), receivedOn: date, paidOn: date, email: z.string() })),
  clearances: z.array(z.string()),
  safety: z.record(z.object({ shares: z.array(z.string()).default([]), firstAid: z.string().default(''), bootSize: z.string().default('') })),
  scaleCards: z.array(z.object({ number: z.string(), barXMm: z.number(), barYMm: z.number(), thicknessMm: z.number() })),
})

const consentShape = z.object({ clauses: z.array(z.object({ code: z.string(), title: z.string(), text: z.string(), safety: z.boolean() })), choices: z.array(z.object({ code: z.string(), text: z.string() })) })
const instrumentsShape = z.array(z.object({ code: z.string(), name: z.string(), quantities: z.array(z.string()), expandedU: z.number(), relative: z.boolean().default(false), unit: z.string() }))
const courseShape = z.object({ code: z.string(), title: z.string(), summary: z.string(), modules: z.array(z.object({ number: z.number().int(), title: z.string(), outcome: z.string(), gates: z.array(z.string()) })) })
const lessonShape = z.object({ number: z.number().int(), slug: z.string(), title: z.string(), module: z.number().int(), ops: z.array(z.number().int()) }).strict()

export type SchoolContent = ReturnType<typeof readContent>

/**
 * Everything of content/ that a fresh school starts with, checked.
 *
 * @throws {z.ZodError} when a file is not as the seeder needs it
 */
export function readContent() {
  return {
    scenario: scenarioShape.parse(json('scenario.json')),
    start: startShape.parse(json('start.json')),
    rubric: json('rubric.json') as Rubric,
    castings: json('castings.json') as (CastingCard & { code: string, name: string })[],
    consent: consentShape.parse(json('consent.json')),
    instruments: instrumentsShape.parse(json('instruments.json')),
    course: courseShape.parse(json('course.json')),
    lessons: readdirSync(new URL('lessons/', folder)).filter(name => /^\d\d-.*\.md$/.test(name)).sort().map((name) => {
      const { data, content } = matter(readFileSync(new URL(`lessons/${name}`, folder), 'utf8'))
      return { ...lessonShape.parse(data), file: name, markdown: content.trim() }
    }),
  }
}
