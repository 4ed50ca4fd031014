import { expect, it } from 'vitest'
import type { CriterionState } from '#shared/domain/rubric/criterion'
import { headResult, type HeadRow } from '#shared/domain/rubric/head-result'
import { rubric } from './school'

// Weights are the rubric's own: R-01 2 (must), K-04 and the rest as content/school/rubric.json has them; the rule is handbook 3.3.
const criteria = rubric.stages.filter(stage => stage.op < 30).flatMap(stage => stage.criteria)
const row = (criterion: string, state: CriterionState, change: Partial<HeadRow> = {}): HeadRow => ({ criterion, state, pConform: 0.99, text: `Said of ${criterion}.`, ...change })
const allAccept = criteria.map(one => row(one.id, 'accept'))
const but = (id: string, state: CriterionState) => allAccept.map(one => one.criterion === id ? row(id, state) : one)

it('is Sound when everything is accepted, and has nothing to work on', () => {
  expect(headResult(allAccept, criteria)).toMatchObject({ word: 'Sound', score: 100, workOn: null })
})

it('stays "not yet" where nobody ever looked at a must', () => {
  const must = criteria.find(one => one.mustPass)!
  expect(headResult(allAccept.filter(one => one.criterion !== must.id), criteria).word).toBe('not yet')
  const optional = criteria.find(one => !one.mustPass)!
  expect(headResult(allAccept.filter(one => one.criterion !== optional.id), criteria).word).toBe('Sound')
})

it('names what counts most first, and between equals what was surest', () => {
  const { best } = headResult(allAccept, criteria)
  const weights = best.map(one => one.weight)
  expect(best).toHaveLength(3)
  expect(weights).toEqual([...criteria.map(one => one.weight)].sort((a, b) => b - a).slice(0, 3))
  const same = criteria.filter(one => one.weight === weights[0])
  const surest = same.at(-1)!
  expect(headResult(allAccept.map(one => ({ ...one, pConform: one.criterion === surest.id ? 1 : 0.96 })), criteria).best[0]?.id).toBe(surest.id)
})

it('praises nothing that was rejected at one port, and works on a reject before a borderline that counts more', () => {
  const [heavy, light] = [...criteria].sort((a, b) => b.weight - a.weight || 0).filter((_, at, all) => at === 0 || at === all.length - 1)
  const rows = [...but(heavy!.id, 'borderline').filter(one => one.criterion !== light!.id), row(light!.id, 'accept'), row(light!.id, 'reject', { text: 'Too thin at 12.' })]
  const { best, workOn } = headResult(rows, criteria)
  expect(workOn).toEqual({ criterion: light, text: 'Too thin at 12.' })
  expect(best.map(one => one.id)).not.toContain(light!.id)
  expect(headResult(but(heavy!.id, 'borderline'), criteria).workOn?.criterion.id).toBe(heavy!.id)
})
