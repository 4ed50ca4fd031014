import { describe, expect, it } from 'vitest'
import { parseTypedNumber } from '#shared/domain/units/parse-typed-number'

describe('parseTypedNumber', () => {
  it.each([
    ['41.98', 41.98, 0.01], ['41,98', 41.98, 0.01], ['42', 42, 1], ['\u22123.2', -3.2, 0.1], ['1.007,6', 1007.6, 0.1], ['1,234.5', 1234.5, 0.1],
    ['0,123', 0.123, 0.001], ['1.614', 1.614, 0.001], ['1 234', 1234, 1], ['.5', 0.5, 0.1], [' 36.50 ', 36.5, 0.01], ['-0', 0, 1], ['1.234.567', 1234567, 1],
  ])('reads "%s" as %d, to %d', (typed, value, resolution) => {
    expect(parseTypedNumber(typed)).toEqual({ ok: true, value, resolution })
  })

  it('asks about a comma that may part thousands, unless the habit is known', () => {
    expect(parseTypedNumber('1,234')).toMatchObject({ ok: false, code: 'comma-or-thousands', message: expect.stringMatching(/1\.234 or as 1234/) })
    expect(parseTypedNumber('1,234', { decimal: ',' })).toMatchObject({ ok: true, value: 1.234 })
    expect(parseTypedNumber('1,234', { decimal: '.' })).toMatchObject({ ok: true, value: 1234 })
    expect(parseTypedNumber('1.013', { decimal: ',' })).toMatchObject({ ok: true, value: 1013 })
  })

  it.each([
    ['', 'empty'], ['   ', 'empty'], ['1,2,3', 'too-many-separators'], ['1.2.3', 'too-many-separators'], ['12 34', 'too-many-separators'], ['1,23.45.6', 'too-many-separators'],
    ['NaN', 'not-a-number'], ['1e999', 'not-a-number'], ['1e3', 'not-a-number'], ['Infinity', 'not-a-number'], ['0x1', 'not-a-number'], ['\0', 'not-a-number'], ['4\x001', 'not-a-number'],
    ['\uD800', 'not-a-number'], ['41 mm', 'not-a-number'], ['--3', 'not-a-number'], ['.', 'not-a-number'], ['9'.repeat(41), 'too-long'],
  ])('refuses "%s" as %s, with a sentence', (typed, code) => {
    const read = parseTypedNumber(typed)
    expect(read).toMatchObject({ ok: false, code })
    expect(read.ok ? '' : read.message).toMatch(/\S.*[.]$/)
    expect(read.ok ? '' : read.message).not.toMatch(/[\0\uD800]/)
  })
})
