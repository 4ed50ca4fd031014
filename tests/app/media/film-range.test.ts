import { describe, expect, it } from 'vitest'
import { cueAt, cuesWithin, filmRange, isOver, openingSecond } from '~/components/media/film-range'

const cues = [{ fromMs: 0, toMs: 4000, text: 'One' }, { fromMs: 5000, toMs: 9000, text: 'Two' }, { fromMs: 9000, toMs: 12_000, text: 'Three' }]

describe('a piece of a film', () => {
  it.each([
    ['the whole film', {}, 20, { start: 0, end: 20 }],
    ['a piece', { start: 4, end: 9 }, 20, { start: 4, end: 9 }],
    ['an end past the film\'s own', { start: 4, end: 90 }, 20, { start: 4, end: 20 }],
    ['an end before its start', { start: 4, end: 2 }, 20, { start: 4, end: 20 }],
    ['a film nobody knows the length of', { start: 4 }, null, { start: 4, end: null }],
  ])('is %s', (_what, piece, durationSeconds, range) => {
    expect(filmRange({ ...piece, durationSeconds })).toEqual(range)
  })

  it('opens at the second asked for, else where one stopped in it, else at its beginning', () => {
    const range = { start: 4, end: 9 }
    expect(openingSecond(range, 6, { seconds: 5, finished: false })).toBe(6)
    expect(openingSecond(range, 30, { seconds: 5, finished: false })).toBe(5)
    expect(openingSecond(range, undefined, { seconds: 2, finished: false })).toBe(4)
    expect(openingSecond(range, undefined, null)).toBe(4)
  })

  it('begins again for who stopped at its end', () => {
    expect(isOver(8.6, { start: 4, end: 9 })).toBe(true)
    expect(isOver(8.4, { start: 4, end: 9 })).toBe(false)
    expect(openingSecond({ start: 4, end: 9 }, undefined, { seconds: 8.6, finished: true })).toBe(4)
  })

  it('has the words that are heard in it, also the one that began before', () => {
    expect(cuesWithin(cues, { start: 6, end: 9 }).map(cue => cue.text)).toEqual(['Two'])
    expect(cuesWithin(cues, { start: 4, end: null }).map(cue => cue.text)).toEqual(['Two', 'Three'])
  })

  it('knows which words stand at a moment, also in the pause after them and a hair before', () => {
    expect([-1, 0, 4.5, 4.9995, 8.9, 9, 60].map(second => cueAt(cues, second))).toEqual([-1, 0, 0, 1, 1, 2, 2])
  })
})
