import { z } from 'zod'
import type { MediaView } from './media'
import type { Side } from '../domain/units/port'
import type { CriterionResult } from '../domain/rubric/evidence'
import type { LessonDocument } from './lesson-document'
import { cleanText, someText } from './text'
import { isWithinDepth } from './within-depth'

export const slugParams = z.object({ slug: z.string().regex(/^[a-z0-9-]{1,80}$/) })

/**
 * One accept band of a criterion: of one side of the head, one wall or one lift where the rubric tells them apart.
 * `hard` is the sentence on the hard least, where cutting on has no return; `words` is the band in both units.
 */
export interface LimitBand { band: NonNullable<CriterionResult['band']>, side: Side | null, at: string | null, liftShare: number | null, words: string, hard: string | null }
/** A criterion inside a lesson, for the reader's casting. No bands: it does not apply to that casting. */
export interface LimitView { criterion: string, title: string, unit: string, bands: LimitBand[], casting: { code: string, name: string } | null }

export interface LessonSummary { number: number, slug: string, title: string, module: string, moduleNumber: number, ops: number[], version: number, minutes: number | null, progress: { anchor: string | null, finished: boolean } | null, hasDraft: boolean }
/** `version` is 0, and there is nothing to read, until a lesson is published for the first time. */
export interface LessonView extends LessonSummary {
  /** Rendered on the server and sanitised; blocks stand as elements with data- attributes the page fills in. */
  html: string
  headings: { id: string, text: string, level: number }[]
  publishedAt: string
  whatChanged: string, why: string
  limits: Record<string, LimitView>
  clips: Record<string, MediaView>
  /** Set when the reader keeps an older version because their head is under way. */
  kept: { newest: number, whatChanged: string, why: string } | null
  notes: NoteView[]
}
export interface NoteView { id: string, lesson: { slug: string, number: number, title: string }, anchor: string | null, text: string, updatedAt: string }
/** A heading's id, as it stands in the address after #. */
const anchor = z.string().max(120).regex(/^[a-z0-9-]*$/, 'is not the address of a heading')
export const noteInput = z.object({ anchor: anchor.nullable().default(null), text: someText(5000) }).strict()
export type NoteInput = z.infer<typeof noteInput>
export const noteParams = z.object({ id: z.string().uuid() })
export const progressInput = z.object({ anchor: anchor.nullable(), finished: z.boolean().default(false) }).strict()
export type ProgressInput = z.infer<typeof progressInput>

export interface LessonVersionSummary { version: number, title: string, publishedAt: string, publishedBy: string | null, whatChanged: string, why: string }
/** A lesson as it is being written. `revision` grows with every save and every publishing, so that a save over somebody else's is seen. Without a draft it holds what is published. */
export interface DraftView { slug: string, number: number, revision: number, title: string, document: LessonDocument, savedBy: string | null, savedAt: string | null, publishedVersion: number }
/** Deeper than any page needs (a table in a step in a list is 11), and shallow enough for whatever walks it. */
export const deepestDocument = 24
/** What a document may weigh, bytes; pictures and films are not in it. */
export const largestDocument = 524_288
const documentShape = z.object({ type: z.literal('doc') }).passthrough()
  .refine(value => isWithinDepth(value, deepestDocument * 2 + 4), 'is nested too deeply')
  .transform(value => value as unknown as LessonDocument)
export const draftSaveInput = z.object({ seen: z.number().int().min(0), title: someText(160), document: documentShape }).strict()
export type DraftSaveInput = z.infer<typeof draftSaveInput>
export const previewInput = z.object({ title: someText(160), document: documentShape }).strict()
export type PreviewInput = z.infer<typeof previewInput>
/** What publishing would refuse, where in the document (`content.3.content.0`), as the code it would answer. */
export interface PublishProblem { path: string, code: 'alt_missing' | 'picture_missing' | 'clip_caption_missing' | 'clip_not_ready' | 'criterion_unknown' | 'lesson_empty' | 'link_unknown', message: string }
/** The lesson as students would see it, kept nowhere. */
export interface PreviewView extends Pick<LessonView, 'title' | 'html' | 'headings' | 'limits' | 'clips'> { problems: PublishProblem[] }
export const publishInput = z.object({ seen: z.number().int().min(1), whatChanged: someText(500), why: someText(500) }).strict()
export type PublishInput = z.infer<typeof publishInput>
/** `module` is its number; `course` its course's code, needed only where courses share a number. */
export const lessonInput = z.object({ title: someText(160), module: z.number().int().min(1).max(60), course: z.string().max(40).optional(), ops: z.array(z.number().int().min(1).max(999)).max(20).default([]) }).strict()
export type LessonInput = z.infer<typeof lessonInput>
export const versionQuery = z.object({ version: z.coerce.number().int().min(1).max(100_000).optional() })
export interface LessonMade { slug: string, number: number }
export interface LessonPublished { slug: string, version: number }
export interface ProgressView { anchor: string | null, finished: boolean }

export const searchQuery = z.object({ q: cleanText(200), limit: z.coerce.number().int().min(1).max(50).default(20) })
export type SearchQuery = z.infer<typeof searchQuery>
/** `snippet` marks what was found between ⟦ and ⟧, plain text. */
export interface SearchHit { lesson: { slug: string, number: number, title: string }, kind: 'text' | 'caption', heading: string, anchor: string, clip: string | null, seconds: number | null, snippet: string }

/** Best first. `spelling` is true where nothing was found as it was written, and words near it were searched for. */
export interface SearchAnswer { items: SearchHit[], spelling: boolean }

export interface ShelfView {
  access: { until: string | null, open: boolean, renewal: { url: string } | null }
  modules: { number: number, title: string, outcome: string, lessons: LessonSummary[], finished: number }[]
  resume: { slug: string, number: number, title: string, anchor: string | null, clip: { id: string, title: string, seconds: number } | null } | null
}
