import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, real } from './column'
import { Submission } from './Submission'

/** All results of one submission at one version, made in one go. One per version, whoever or whatever runs twice. */
export const ScoreSet = defineEntity({
  name: 'ScoreSet',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    version: p.integer(),
    score: real().nullable(),
    word: p.string().length(20),
    /** Evidence rows it rests on, with the rubric, casting and method versions. Loaded only when asked for. */
    restsOn: p.json<{ rubric: number, casting: string, method: string, readings: string[], photos: string[], documents: string[], sheets: string[] }>().lazy(true, false),
    scoredAt: instant(),
  },
  uniques: [{ properties: ['submission', 'version'] }],
})
export type ScoreSet = InferEntity<typeof ScoreSet>
