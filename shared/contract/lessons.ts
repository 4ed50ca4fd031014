import { z } from 'zod'
import type { MediaView } from './media'
import type { LessonDocument } from './lesson-document'
import { cleanText, someText } from './text'
import type { CriterionResult } from '../domain/rubric/evidence'

export const slugParams = z.object({ slug: z.string().regex(/^[a-z0-9-]{1,80}$/) })

/** A criterion inside a lesson, for the reader's casting: its band as numbers, both units drawn by the page. */
export interface LimitView { criterion: string, title: string, unit: string, band: CriterionResult['band'], casting: { code: string, name: string } | null, hard: string | null }

export interface LessonSummary { number: number, slug: string, title: string, module: string, moduleNumber: number, ops: number[], version: number, minutes: number | null, progress: { anchor: string | null, finished: boolean } | null, hasDraft: boolean }
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
export const noteInput = z.object({ anchor: cleanText(120).nullable().default(null), text: someText(5000) }).strict()
export const progressInput = z.object({ anchor: cleanText(120).nullable(), finished: z.boolean().default(false) }).strict()

export interface LessonVersionSummary { version: number, title: string, publishedAt: string, publishedBy: string | null, whatChanged: string, why: string }
export interface DraftView { slug: string, number: number, revision: number, title: string, document: LessonDocument, savedBy: string | null, savedAt: string | null, publishedVersion: number }
const documentShape = z.object({ type: z.literal('doc') }).passthrough().transform(value => value as unknown as LessonDocument)
export const draftSaveInput = z.object({ seen: z.number().int().min(0), title: someText(160), document: documentShape }).strict()
export type DraftSaveInput = z.infer<typeof draftSaveInput>
export const publishInput = z.object({ seen: z.number().int().min(1), whatChanged: someText(500), why: someText(500) }).strict()
export const lessonInput = z.object({ title: someText(160), module: z.number().int().min(1).max(60), ops: z.array(z.number().int()).max(20).default([]) }).strict()

export const searchQuery = z.object({ q: cleanText(200), limit: z.coerce.number().int().min(1).max(50).default(20) })
/** `snippet` marks what was found between ⟦ and ⟧, plain text. */
export interface SearchHit { lesson: { slug: string, number: number, title: string }, kind: 'text' | 'caption', heading: string, anchor: string, clip: string | null, seconds: number | null, snippet: string }

export interface ShelfView {
  access: { until: string | null, open: boolean, renewal: { url: string } | null }
  modules: { number: number, title: string, outcome: string, lessons: LessonSummary[], finished: number }[]
  resume: { slug: string, number: number, title: string, anchor: string | null, clip: { id: string, title: string, seconds: number } | null } | null
}
