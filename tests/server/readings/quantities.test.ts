import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { doubtOfReading } from '#server/services/readings/doubt-of-reading'
import { readingQuantities } from '#shared/contract/quantities'
import { typedValues } from '#shared/contract/typed-values'
import type { CastingCard } from '#shared/domain/geometry/casting'
import { nominalLength } from '#shared/domain/geometry/nominal-length'
import { baseUnit } from '#shared/domain/rubric/base-unit'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { convert } from '#shared/domain/units/convert'

const content = <Value>(name: string): Value => JSON.parse(readFileSync(new URL(`../../../content/school/${name}`, import.meta.url), 'utf8')) as Value
const { stages } = content<Rubric>('rubric.json')
const criteria = stages.flatMap(stage => stage.criteria)
const instruments = content<{ code: string, name: string, quantities: string[], expandedU: number, relative?: boolean, unit: string }[]>('instruments.json')

it('knows every quantity the rubric wants read', () => {
  const wanted = [...new Set(criteria.flatMap(criterion => criterion.wants.flatMap(want => (want.kind === 'reading' && want.quantity ? [want.quantity] : []))))]
  expect(wanted.length).toBeGreaterThan(20)
  expect(wanted.filter(name => !Object.hasOwn(readingQuantities, name))).toEqual([])
})

/** What the rubric judges of these is a difference of readings or a share, so its bands say nothing of a reading. */
const derived = ['throat-diameter', 'chamber-volume', 'guide-boss-width', 'port-width']

describe.each(Object.entries(readingQuantities))('%s', (name, quantity) => {
  it('can be typed in each of its units', () => {
    for (const unit of quantity.units) {
      const text = quantity.kind === 'yes/no' ? 'yes' : '1'
      expect(typedValues(quantity, unit, [text])).toMatchObject({ ok: true })
    }
  })

  it('has an instrument of the school whose doubt it can be given', () => {
    const fit = instruments.filter(one => one.quantities.includes(name))
    expect(fit).not.toEqual([])
    for (const one of fit) expect(doubtOfReading({ ...one, relative: one.relative ?? false }, [1], quantity.baseUnit)).toBeGreaterThanOrEqual(0)
  })
})

it('takes every reading the rubric accepts or calls borderline', () => {
  const judged = criteria.flatMap((criterion) => {
    const quantity = readingQuantities[criterion.quantity]
    if (!quantity || derived.includes(criterion.quantity) || /\b(?:difference|shortened)\b/.test(criterion.unit) || criterion.unit === '%' || baseUnit(criterion.unit) !== quantity.baseUnit) return []
    return [...criterion.accept, ...criterion.soft].map(({ lo, hi }) => ({ id: criterion.id, lo: lo ?? quantity.least, hi: hi ?? quantity.most, quantity }))
  })
  expect(judged.length).toBeGreaterThan(20)
  expect(judged.filter(({ lo, hi, quantity }) => lo < quantity.least || hi > quantity.most).map(one => one.id)).toEqual([])
})

describe.each(['throat-diameter', 'valve-head-diameter', 'valve-stem-diameter', 'port-width'])('%s', (name) => {
  it.each(content<CastingCard[]>('castings.json').map(card => [card.name, card] as const))('takes the %s card\'s own size in millimetres and not in inches', (_name, card) => {
    const quantity = readingQuantities[name]
    for (const side of ['intake', 'exhaust'] as const) {
      const nominal = nominalLength(card, name, side) ?? Number.NaN
      expect(nominal).toBeGreaterThan(quantity?.least ?? Number.NaN)
      expect(nominal).toBeLessThan(quantity?.most ?? Number.NaN)
      expect(convert(nominal, 'in', 'mm')).toBeGreaterThan(quantity?.most ?? Number.NaN)
    }
  })
})
