import { z } from 'zod'
import { cleanText, someText } from './text'

const side = z.enum(['intake', 'exhaust'])
const endKind = z.enum(['natural', 'no-return', 'put-right'])
const figure = z.number().finite().min(-1e6).max(1e6)
const scope = z.string().regex(/^(\*|[A-Z]|[A-Z][IE](@0\.\d{1,3})?)$/, 'is not a scope: "*", a casting ("D"), a casting and side ("DI"), or with a lift ("DI@0.12")')
const opNumber = z.number().int().min(10).max(990)
const pointCode = z.string().regex(/^(hold|witness)-\d$/, 'is not a point')
const criterionId = z.string().regex(/^[A-Z]{1,2}-\d{2}[a-z]?$/, 'is not a criterion')
const stageCode = z.string().regex(/^[A-Z]{1,2}$/, 'is not a stage')

const softBand = z.object({ scope, lo: figure.nullable(), hi: figure.nullable(), at: someText(80).optional(), borrowedFrom: scope.optional() }).strict()
const acceptBand = softBand.extend({ loKind: endKind, hiKind: endKind }).strict().superRefine((band, context) => {
  if (band.lo === null && band.hi === null) context.addIssue({ code: 'custom', message: 'an accept band has at least one end' })
})
const doubt = z.object({ value: figure.min(0), unit: someText(30), relative: z.boolean() }).strict()
const feedbackKey = z.enum(['accept', 'borderline', 'reject', 'borderlineLow', 'borderlineHigh', 'rejectLow', 'rejectHigh', 'rejectLowLifts', 'rejectDigits', 'rejectRatio', 'rejectTop'])

const want = z.object({
  kind: z.enum(['photo', 'reading', 'flow-sheet', 'document']),
  view: z.string().regex(/^view-\d{1,2}$/, 'is not a view').optional(),
  quantity: someText(60).optional(),
  per: z.enum(['head', 'cylinder', 'port']),
  side: side.optional(),
  places: z.array(someText(80)).min(1).max(60).optional(),
  when: z.enum(['before', 'after']).optional(),
  count: z.number().int().min(1).max(20),
  note: cleanText(300).optional(),
}).strict().superRefine((given, context) => {
  if (given.kind === 'photo' && given.view === undefined) context.addIssue({ code: 'custom', path: ['view'], message: 'name the view of a wanted photo' })
  if (given.kind === 'reading' && given.quantity === undefined) context.addIssue({ code: 'custom', path: ['quantity'], message: 'name the quantity of a wanted reading' })
})

const criterion = z.object({
  id: criterionId,
  title: someText(160),
  kind: z.enum(['judged', 'measured', 'photo-measured', 'derived from flow']),
  quantity: someText(60),
  where: someText(160).optional(),
  unit: someText(30),
  accept: z.array(acceptBand).min(1).max(40),
  soft: z.array(softBand).max(40),
  weight: z.number().finite().positive().max(100),
  mustPass: z.boolean(),
  safetyStop: z.boolean(),
  expandedU: doubt.nullable(),
  readingU: doubt.optional(),
  evidence: cleanText(1000),
  wants: z.array(want).max(40),
  basis: cleanText(500),
  feedback: z.record(feedbackKey, cleanText(1000)),
  examples: z.array(z.object({ for: cleanText(60), text: cleanText(1000), example: z.literal(true) }).strict()).max(20).optional(),
  doesNotApply: z.array(z.object({ scope: scope.optional(), when: cleanText(200).optional(), because: someText(300) }).strict()).max(10).optional(),
  borrowedNote: cleanText(500).optional(),
  rule: z.literal('flow-loss').optional(),
  dueAt: pointCode.optional(),
}).strict().superRefine((given, context) => {
  if (given.safetyStop && !given.mustPass) context.addIssue({ code: 'custom', path: ['mustPass'], message: 'a stop is a must as well' })
})

const point = z.object({
  code: pointCode,
  kind: z.enum(['hold', 'witness']),
  when: z.enum(['before', 'first', 'last-cut', 'after']),
  signers: z.array(someText(20)).min(1).max(6),
  signersNeeded: z.number().int().min(1).max(2).optional(),
  waitMinutes: z.number().int().min(0).max(1440).optional(),
  needs: z.array(z.union([stageCode, criterionId])).max(60),
}).strict()

const stage = z.object({
  code: stageCode,
  op: opNumber,
  name: someText(120),
  points: z.array(point).max(4),
  clearances: z.array(someText(40)).max(10),
  staffClearances: z.array(someText(40)).max(10).optional(),
  criteria: z.array(criterion).min(1).max(60),
}).strict()

/** A whole rubric, as an instructor saves it. What refers to something within it must find it there. */
export const wholeRubric = z.object({
  version: z.number().int().min(1),
  note: cleanText(2000),
  endKinds: z.record(endKind, cleanText(300)).optional(),
  states: z.array(cleanText(40)).max(10).optional(),
  scopes: z.record(cleanText(20), cleanText(120)).optional(),
  liftRule: cleanText(1000),
  views: z.record(z.string().regex(/^view-\d{1,2}$/), cleanText(120)),
  signerPosts: z.record(someText(20), cleanText(120)),
  standIns: z.record(someText(20), z.array(cleanText(80)).max(10)),
  stages: z.array(stage).min(1).max(60),
}).strict().superRefine((rubric, context) => {
  const say = (path: (string | number)[], message: string) => context.addIssue({ code: 'custom', path, message })
  const once = new Map<string, string>()
  const criteria = new Set(rubric.stages.flatMap(one => one.criteria.map(each => each.id)))
  const codes = new Set(rubric.stages.map(one => one.code))
  const points = new Set(rubric.stages.flatMap(one => one.points.map(each => each.code)))
  const claim = (what: string, path: (string | number)[]) => {
    if (once.has(what)) say(path, `${what} is there twice`)
    once.set(what, path.join('.'))
  }
  rubric.stages.forEach((one, at) => {
    claim(`op ${one.op}`, ['stages', at, 'op'])
    claim(`stage ${one.code}`, ['stages', at, 'code'])
    const before = rubric.stages[at - 1]
    if (before && before.op >= one.op) say(['stages', at, 'op'], 'stages stand in the order of their ops')
    one.points.forEach((each, index) => {
      const path = ['stages', at, 'points', index]
      claim(each.code, [...path, 'code'])
      if (!each.code.startsWith(each.kind)) say([...path, 'kind'], `${each.code} is no ${each.kind}`)
      for (const need of each.needs) if (!criteria.has(need) && !codes.has(need)) say([...path, 'needs'], `there is no ${need} in this rubric`)
      for (const post of each.signers) if (!(post in rubric.signerPosts)) say([...path, 'signers'], `there is no post "${post}"`)
    })
    one.criteria.forEach((each, index) => {
      const path = ['stages', at, 'criteria', index]
      claim(each.id, [...path, 'id'])
      if (each.dueAt !== undefined && !points.has(each.dueAt)) say([...path, 'dueAt'], `there is no ${each.dueAt} in this rubric`)
      each.wants.forEach((given, place) => {
        if (given.view !== undefined && !(given.view in rubric.views)) say([...path, 'wants', place, 'view'], `there is no ${given.view} in this rubric`)
      })
    })
  })
})

/** `after` is the version the writer began from: two who write at once do not overwrite each other. */
export const rubricInput = z.object({ after: z.number().int().min(1), note: someText(2000), rubric: wholeRubric }).strict()
export type RubricInput = z.infer<typeof rubricInput>
