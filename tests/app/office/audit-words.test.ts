import { expect, it } from 'vitest'
import { actionWords, detailWords } from '../../../components/office/audit-words'

it('says what happened in words, and an action nobody named by its code without dashes', () => {
  expect(actionWords('roles-changed')).toBe('roles changed')
  expect(actionWords('point.shut-again')).toBe('point shut again')
  expect(actionWords('bench-swept-twice')).toBe('bench swept twice')
})

it('reads a detail out without ids and hashes, which only the record needs', () => {
  const detail = JSON.stringify({ again: false, before: ['student'], movedTo: 'CIN-26', place: '863f4ccb-3e47-4c80-9a12-34e4005001cc', sha256: 'c8'.repeat(32), sumMinor: 35000 })
  expect(detailWords(detail)).toBe('again: no; before: student; moved to: CIN-26; sum minor: 35000')
  expect(detailWords('{}')).toBe('')
})
