import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { CriterionState } from '../../../shared/domain/rubric/criterion'
import type { Side } from '../../../shared/domain/units/port'
import { id, instant, real } from './column'
import { CriterionResult } from './CriterionResult'
import { Photo } from './Photo'
import { Submission } from './Submission'
import { User } from './User'

/** An instructor's decision on a submission, with what the student reads. */
export const Review = defineEntity({
  name: 'Review',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    /** Version of the submission that was looked at. */
    seenVersion: p.integer(),
    by: () => p.manyToOne(User).ref(),
    at: instant(),
    decision: p.enum(['release', 'send-back', 'stop'] as const),
    point: p.string().length(20).nullable(),
    condition: p.text().nullable(),
    feedback: p.text().default(''),
    /** Sentences as sent, by result: the proposal, or the instructor's edit. */
    sentences: p.json<{ criterion: string, title: string, cylinder: number | null, side: Side | null, at: string | null, state: CriterionState, text: string, edited: boolean }[]>(),
    /** Reasons typed for borderline or not assessed musts that were released. */
    reasons: p.json<{ criterion: string, cylinder?: number | null, side?: Side | null, reason: string }[]>(),
    readAt: instant().nullable(),
  },
  indexes: [{ properties: ['submission'] }],
})
export type Review = InferEntity<typeof Review>

/** A person's state beside the machine's for one result. */
export const Override = defineEntity({
  name: 'Override',
  tableName: 'result_override',
  properties: {
    id: id(),
    review: () => p.manyToOne(Review).ref(),
    result: () => p.manyToOne(CriterionResult).ref(),
    state: p.enum(['accept', 'borderline', 'reject'] as const),
    reason: p.text(),
    by: () => p.manyToOne(User).ref(),
    at: instant(),
  },
  uniques: [{ properties: ['review', 'result'] }],
})
export type Override = InferEntity<typeof Override>

/** A numbered pin on a photo, tied to a criterion. Co-ordinates are shares of the upright picture, 0 to 1. */
export const PhotoPin = defineEntity({
  name: 'PhotoPin',
  properties: {
    id: id(),
    review: () => p.manyToOne(Review).ref(),
    photo: () => p.manyToOne(Photo).ref(),
    number: p.integer(),
    x: real(),
    y: real(),
    criterion: p.string().length(10),
    text: p.text().default(''),
  },
  uniques: [{ properties: ['review', 'number'] }],
})
export type PhotoPin = InferEntity<typeof PhotoPin>
