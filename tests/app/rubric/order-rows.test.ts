import { describe, expect, it } from 'vitest'
import type { CriterionState } from '#shared/domain/rubric/criterion'
import { orderRows, worstFirst } from '~/components/rubric/order-rows'

const row = (id: string, state: CriterionState, stop = false, must = false) => ({ id, state, stop, must })

describe('orderRows', () => {
  it('puts stops that stand first, then open musts, and leaves equals in the order of the rubric', () => {
    const rows = [row('fine', 'accept', true, true), row('small reject', 'reject'), row('must, not in', 'not-assessed', false, true), row('stop, close', 'borderline', true, true), row('stop, out', 'reject', true, true), row('other', 'accept')]
    expect(orderRows(rows).map(one => one.id)).toEqual(['stop, out', 'stop, close', 'must, not in', 'small reject', 'fine', 'other'])
  })
  it('takes the worst result as the one a criterion is known by', () => {
    expect(worstFirst([row('a', 'accept'), row('b', 'not-assessed'), row('c', 'reject'), row('d', 'borderline')]).map(one => one.id)).toEqual(['c', 'd', 'b', 'a'])
  })
})
