import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { CriterionResult as Judged } from '../../../shared/domain/rubric/evidence'
import type { CriterionState } from '../../../shared/domain/rubric/criterion'
import { id, jsonOnce, real } from './column'
import { ScoreSet } from './ScoreSet'

/** One judged result of one score set. The machine's state stays; a person's stands beside it in `Override`. */
export const CriterionResult = defineEntity({
  name: 'CriterionResult',
  properties: {
    id: id(),
    set: () => p.manyToOne(ScoreSet).ref(),
    criterion: p.string().length(10),
    cylinder: p.integer().nullable(),
    side: p.enum(['intake', 'exhaust'] as const).nullable(),
    at: p.string().length(120).nullable(),
    liftMm: real().nullable(),
    state: p.string().length(20).$type<CriterionState>(),
    value: real().nullable(),
    unit: p.string().length(30),
    expandedUncertainty: real().nullable(),
    pConform: real().nullable(),
    metalLeft: jsonOnce<Judged['metalLeft']>().nullable(),
    text: p.text(),
    trace: jsonOnce<Judged['trace']>(),
    band: jsonOnce<Judged['band']>().nullable(),
    typedForPhoto: p.boolean().default(false),
    /** Place in the set, so that pages list results in the rubric's order. */
    position: p.integer(),
  },
  uniques: [{ properties: ['set', 'position'] }],
})
export type CriterionResult = InferEntity<typeof CriterionResult>
