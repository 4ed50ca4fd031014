import type { Side } from '#shared/domain/units/port'
import type { IronRule } from './iron'
import type { PhotosTaken, PhotoToTake } from './wanted-proof'

/** A sheet that is handed in: one of the school's files, or a generated run where there is none. */
export type StorySheet
  = { file: string }
    | { generated: 'base' | 'bowl' | 'port', cylinder: number, side: Side, run?: number, date: string, like?: string }

/** Sheets handed in on one evening, the one that counts last. */
export interface SheetEvening { at: string, of: StorySheet[], photos?: PhotoToTake[] }

/** A numbered pin on the newest picture of that view and port. */
export interface StoryPin { view: string, cylinder: number, side: Side, x: number, y: number, criterion: string, text: string }

export interface StoryReview {
  /** First name. */
  by: string
  at: string
  decision: 'release' | 'send-back'
  feedback: string
  condition?: string
  pins?: StoryPin[]
}

/** One part of a stage as one student went through it. What has no time did not happen. Instants are by the school's wall clock. */
export interface StoryPart {
  op: number
  begun: string
  /** When the readings, photos and papers go in; half-way to the asking when left out. `null`: nothing goes in. */
  proof?: string | null
  /** Only these of them. */
  only?: { quantities?: string[], cylinders?: number[], skipSpots?: RegExp, views?: string[] }
  sheets?: SheetEvening | SheetEvening[]
  asked?: string
  /** What the student writes with it. */
  note?: string
  review?: StoryReview
}

export interface StoryHead {
  number: string
  student: string
  /** Pictures of every view wanted, or those a stop cannot do without. */
  photos: PhotosTaken
  bench: string
  entry: string
  pipe: string
  rules: IronRule[]
  parts: StoryPart[]
  /** A stop called on the shop floor, and what became of the core. */
  stopped?: { at: string, by: string, where: string, reason: string, scrapped: boolean }
}

/** A part that was asked for and released. */
export function released(op: number, begun: string, asked: string, by: string, at: string, feedback: string, more: Partial<StoryPart> = {}): StoryPart {
  return { op, begun, asked, review: { by, at, decision: 'release', feedback }, ...more }
}

/** A part of a stage without a point of its own: asked for, scored, and looked at with the next point. */
export function scored(op: number, begun: string, asked: string, more: Partial<StoryPart> = {}): StoryPart {
  return { op, begun, asked, ...more }
}

/** Three baseline runs of each side, the given file last where there is one: the newest is the one that later sheets are held against. */
export function baselineRuns(cylinder: number, date: string, files: Partial<Record<Side, string>>): StorySheet[] {
  return (['intake', 'exhaust'] as const).flatMap((side): StorySheet[] => {
    const file = files[side]
    const runs = [1, 2].map((run): StorySheet => ({ generated: 'base', cylinder, side, run, date, ...(file === undefined ? {} : { like: file }) }))
    return [...runs, file === undefined ? { generated: 'base', cylinder, side, run: 3, date } : { file }]
  })
}
