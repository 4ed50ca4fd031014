import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce } from './column'
import { PracticeHead } from './PracticeHead'
import { Review } from './Review'
import { User } from './User'

/** One person's release of a point. Hold 8 needs two by different people. */
export const PointRelease = defineEntity({
  name: 'PointRelease',
  properties: {
    id: id(),
    head: () => p.manyToOne(PracticeHead).ref(),
    point: p.string().length(20),
    review: () => p.oneToOne(Review).ref().owner().unique(),
    by: () => p.manyToOne(User).ref(),
    at: instant(),
    /** Evidence rows and versions the release rests on: thousands of ids by the end of a course, so they are loaded only when asked for. */
    restsOn: p.json<unknown>().lazy(true, false),
    /** Conditions the program added ("no more cutting at ..."), with the criterion that a newer accept ends. */
    conditions: jsonOnce<{ criterion: string, cylinder: number | null, side: string | null, at: string | null, text: string }[]>(),
    /** Condition in the instructor's own words. */
    condition: p.text().nullable(),
    /** Set when newer evidence contradicts it. */
    shutAgainAt: instant().nullable(),
  },
  uniques: [{ properties: ['head', 'point', 'by', 'review'] }],
  indexes: [{ properties: ['head', 'point'] }],
})
export type PointRelease = InferEntity<typeof PointRelease>

/** That the person named was told of a witness point, and whether they came. */
export const WitnessCall = defineEntity({
  name: 'WitnessCall',
  properties: {
    id: id(),
    head: () => p.manyToOne(PracticeHead).ref(),
    point: p.string().length(20),
    toldBy: () => p.manyToOne(User).ref(),
    toldAt: instant(),
    /** Work may go on from here, seen or not. */
    waitUntil: instant(),
    seenBy: () => p.manyToOne(User).ref().nullable(),
    seenAt: instant().nullable(),
  },
  uniques: [{ properties: ['head', 'point'] }],
})
export type WitnessCall = InferEntity<typeof WitnessCall>

/** A stop that stands on a head until it is lifted. */
export const HeadStop = defineEntity({
  name: 'HeadStop',
  properties: {
    id: id(),
    head: () => p.manyToOne(PracticeHead).ref(),
    by: () => p.manyToOne(User).ref(),
    at: instant(),
    criterion: p.string().length(10).nullable(),
    /** Point it was called at, whose later release lifts it; null when it was called on the shop floor. */
    point: p.string().length(20).nullable(),
    /** "pushrod wall, station 30, cylinder 4". */
    where: p.string().length(200),
    reason: p.text(),
    liftedBy: () => p.manyToOne(User).ref().nullable(),
    liftedAt: instant().nullable(),
    liftReason: p.text().nullable(),
  },
  indexes: [{ properties: ['head', 'liftedAt'] }],
})
export type HeadStop = InferEntity<typeof HeadStop>
