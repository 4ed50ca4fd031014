import { describe, expect, it } from 'vitest'
import { timeAgo } from '~/components/ui/time-ago'

// The demo's own instant, and times before it. London is on UTC until 29 March 2026.
const now = new Date('2026-03-26T19:40:00Z')
const ago = (at: string) => timeAgo(new Date(at), now, 'Europe/London')

describe('timeAgo', () => {
  it.each([
    ['2026-03-26T19:39:40Z', 'just now'],
    ['2026-03-26T19:28:00Z', '12 min ago'],
    ['2026-03-26T02:00:00Z', '17 h ago'],
    ['2026-03-25T23:59:00Z', 'yesterday'],
    ['2026-03-25T00:01:00Z', 'yesterday'],
    ['2026-03-21T12:00:00Z', '5 days ago'],
    ['2026-02-11T12:00:00Z', '11 February'],
    ['2025-11-30T12:00:00Z', '30 November 2025'],
  ])('%s is "%s"', (at, words) => {
    expect(ago(at)).toBe(words)
  })
  it('counts days on the school’s calendar, not by 24 hours nor by UTC', () => {
    // 23:30 UTC on 1 June is 00:30 on the 2nd in London.
    expect(timeAgo(new Date('2026-06-01T23:30:00Z'), new Date('2026-06-03T08:00:00Z'), 'Europe/London')).toBe('yesterday')
  })
  it('keeps to hours shortly after midnight', () => {
    expect(timeAgo(new Date('2026-01-01T23:00:00Z'), new Date('2026-01-02T01:00:00Z'), 'Europe/London')).toBe('2 h ago')
  })
})
