import { z } from 'zod'
import { cleanText, someText } from './text'

export const idParams = z.object({ id: z.string().uuid() })
export const stageParams = z.object({ id: z.string().uuid(), op: z.coerce.number().int().min(10).max(990) })

const side = z.enum(['intake', 'exhaust'])
const cylinder = z.number().int().min(1).max(16)
const spotText = cleanText(80)
const criterionCode = z.string().regex(/^[A-Z]{1,2}-\d{2}[a-z]?$/, 'is not a criterion')

export const uploadInput = z.object({
  purpose: z.enum(['photo', 'flow-sheet', 'document', 'lesson-media']),
  filename: someText(255),
  bytes: z.number().int().min(1).max(2 * 1024 ** 3),
  contentType: z.string().regex(/^[\w.+-]+\/[\w.+-]+$/, 'is not a media type').max(120),
  sha256: z.string().regex(/^[0-9a-f]{64}$/, 'is not a SHA-256 in lower-case hex'),
}).strict()
export type UploadInput = z.infer<typeof uploadInput>

export const uploadCompleteInput = z.object({ parts: z.array(z.object({ n: z.number().int().min(1).max(10_000), etag: z.string().max(200) }).strict()).max(300).optional() }).strict()

export const draftInput = z.object({ cylinder: cylinder.optional(), side: side.optional() }).strict()

export const photoInput = z.object({
  uploadId: z.string().uuid(),
  view: z.string().regex(/^view-\d{1,2}$/, 'is not a view'),
  cylinder: cylinder.nullable().default(null),
  side: side.nullable().default(null),
  spot: spotText.optional(),
  cardId: z.string().uuid().optional(),
  seatDepth: z.object({ value: someText(20), unit: z.enum(['mm', 'in']), instrument: someText(60) }).strict().optional(),
  clockMark: z.number().finite().min(0).max(12).optional(),
  takenAt: z.string().datetime({ offset: true }).optional(),
}).strict()
export type PhotoInput = z.infer<typeof photoInput>

export const readingInput = z.object({
  quantity: someText(60).optional(),
  criterion: criterionCode.optional(),
  cylinder: cylinder.nullable().default(null),
  side: side.nullable().default(null),
  at: z.object({
    spot: spotText.optional(),
    clock: spotText.optional(),
    station: z.number().finite().optional(),
    height: z.number().finite().optional(),
    direction: spotText.optional(),
  }).strict().optional(),
  when: z.enum(['before', 'after']).optional(),
  values: z.array(someText(24)).min(1, 'type at least one figure').max(20),
  unit: someText(20),
  instrument: someText(60),
  takenAt: z.string().datetime({ offset: true }).optional(),
  voids: z.string().uuid().optional(),
}).strict().refine(given => given.quantity !== undefined || given.criterion !== undefined, { path: ['quantity'], message: 'name the quantity or the criterion' })
export type ReadingInput = z.infer<typeof readingInput>

export const sheetInput = z.object({
  uploadId: z.string().uuid(),
  bench: cleanText(60).optional(),
  columns: z.array(z.object({ index: z.number().int().min(0).max(200), meaning: someText(40), unit: cleanText(30).optional() }).strict()).max(60).optional(),
  answers: z.record(someText(60), cleanText(200)).optional(),
}).strict()
export type SheetInput = z.infer<typeof sheetInput>

export const documentInput = z.object({ uploadId: z.string().uuid(), note: cleanText(200).default('') }).strict()
export const askInput = z.object({ note: cleanText(2000).optional() }).strict()

export const reviewInput = z.object({
  seen: z.number().int().min(1),
  overrides: z.array(z.object({
    criterion: criterionCode,
    cylinder: cylinder.nullable().optional(),
    side: side.nullable().optional(),
    at: cleanText(120).nullable().optional(),
    state: z.enum(['accept', 'borderline', 'reject']),
    reason: someText(1000),
  }).strict()).max(200).default([]),
  reasons: z.array(z.object({ criterion: criterionCode, cylinder: cylinder.nullable().optional(), side: side.nullable().optional(), reason: someText(1000) }).strict()).max(200).default([]),
  pins: z.array(z.object({ photoId: z.string().uuid(), x: z.number().finite().min(0).max(1), y: z.number().finite().min(0).max(1), criterion: criterionCode, text: cleanText(500).default('') }).strict()).max(50).default([]),
  feedback: cleanText(5000).default(''),
  sentences: z.array(z.object({ criterion: criterionCode, cylinder: cylinder.nullable().default(null), side: side.nullable().default(null), at: cleanText(120).nullable().default(null), text: cleanText(2000) }).strict()).max(300).optional(),
  decision: z.enum(['release', 'send-back', 'stop']),
  point: z.string().regex(/^(hold|witness)-\d$/).nullable().default(null),
  condition: cleanText(1000).optional(),
  /** Versions of the other submissions the point covers, as the sheet showed them; any that moved makes the review stale. */
  seenWith: z.array(z.object({ id: z.string().uuid(), version: z.number().int().min(1) }).strict()).max(50).default([]),
}).strict()
export type ReviewInput = z.infer<typeof reviewInput>

export const stopInput = z.object({ where: someText(200), reason: someText(1000) }).strict()
export type StopInput = z.infer<typeof stopInput>
export const liftInput = z.object({ reason: someText(1000) }).strict()
export type LiftInput = z.infer<typeof liftInput>
export const pointCode = z.string().regex(/^(hold|witness)-\d$/, 'is not a point')
export const pointParams = z.object({ id: z.string().uuid(), code: pointCode })
export const password = z.string().min(10, 'at least 10 characters').max(200).refine(text => text.isWellFormed() && !text.includes('\0'), 'has characters that cannot be kept')
export const setPasswordInput = z.object({ token: z.string().min(20).max(200), password }).strict()
export const forgotInput = z.object({ email: z.string().trim().toLowerCase().email().max(254) }).strict()
export const invitationInput = z.object({ name: someText(120), email: z.string().trim().toLowerCase().email().max(254), roles: z.array(z.enum(['student', 'instructor', 'admin', 'safety'])).min(1).max(4) }).strict()
export type InvitationInput = z.infer<typeof invitationInput>
export const signInInput = z.object({ email: z.string().trim().email('an e-mail address').max(254), password: z.string().min(1, 'your password').max(200) })
