import { afterAll, beforeAll, expect, it } from 'vitest'
import { manyLessons } from '../../../scripts/bench/many-lessons'
import { searches, searchTimes } from '../../../scripts/bench/search-times'
import { openHarness, type Harness } from '../harness'
import { makeSchool } from '../review/school'

let harness: Harness

beforeAll(async () => {
  harness = await openHarness()
}, 60_000)
afterAll(() => harness?.close())

it('answers every kind of search over 2,000 lessons in under 50 ms of the database\'s time', async () => {
  const school = await makeSchool(harness)
  const made = await manyLessons(school.em(), 2000)
  // 2,000 lessons and under 50 ms: what is asked of search.
  expect(made.lessons).toBe(2000)
  expect(made.passages).toBe(24_000)
  const times = await searchTimes(school.em(), harness.app, school.hanne)
  if (process.env.SHOW_TIMES) console.table(times)
  expect(times.map(one => one.q)).toEqual([...searches])
  expect(times.filter(one => one.ms >= 50).map(one => `${one.q}: ${one.ms.toFixed(1)} ms`)).toEqual([])
  // It did search: all but the one of unknown words found something, and the misspelt ones by guessing.
  expect(times.filter(one => one.hits === 0).map(one => one.q)).toEqual(['xylophone'])
  expect(times.filter(one => one.spelling).map(one => one.q)).toEqual(expect.arrayContaining(['dumy valvs', 'lihgt sprnig']))
}, 240_000)
