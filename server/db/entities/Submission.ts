import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce, real } from './column'
import { PracticeHead } from './PracticeHead'
import { User } from './User'

export const submissionParts = ['before', 'first', 'rest'] as const
export type SubmissionPart = (typeof submissionParts)[number]
export const submissionStates = ['draft', 'asked', 'scored', 'decided'] as const
export type SubmissionState = (typeof submissionStates)[number]

/** One try at the proof of one part of one stage. It rests on the head's evidence up to its version. */
export const Submission = defineEntity({
  name: 'Submission',
  properties: {
    id: id(),
    head: () => p.manyToOne(PracticeHead).ref(),
    op: p.integer(),
    part: p.enum([...submissionParts]),
    /** Point this part falls on; null for a stage reviewed with a later point. */
    point: p.string().length(20).nullable(),
    tryNumber: p.integer().default(1),
    /** Raised by every piece of evidence after Ask; results carry the version they were made from. */
    version: p.integer().default(1),
    state: p.enum([...submissionStates]).default('draft'),
    /** Ports this part covers. */
    ports: jsonOnce<{ cylinder: number, side: 'intake' | 'exhaust' }[]>(),
    note: p.text().default(''),
    startedBy: () => p.manyToOne(User).ref(),
    createdAt: instant(),
    askedAt: instant().nullable(),
    /** Version the newest complete result set is of; null before the first. */
    scoredVersion: p.integer().nullable(),
    scoredAt: instant().nullable(),
    decidedAt: instant().nullable(),
    decision: p.enum(['release', 'send-back', 'stop'] as const).nullable(),
    score: real().nullable(),
    word: p.string().length(20).nullable(),
    /** A stop criterion stands rejected or borderline: first in the queue. */
    stopStands: p.boolean().default(false),
  },
  uniques: [{ properties: ['head', 'op', 'part', 'tryNumber'] }],
  // The review queue in its order: what waits is few among all that ever was.
  indexes: [{ name: 'submission_waiting', expression: `create index "submission_waiting" on "submission" ("stop_stands" desc, "asked_at", "id") where "state" in ('asked', 'scored')` }],
})
export type Submission = InferEntity<typeof Submission>
