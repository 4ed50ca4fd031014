import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import SearchResults from '~/components/lessons/SearchResults.vue'
import { clockTime, hitPath, readClockTime, snippetPieces } from '~/components/lessons/found-words'
import type { SearchHit } from '#shared/contract/lessons'

const bowl = { slug: 'bowl', number: 7, title: 'The bowl' }
const shields = { slug: 'dummy-valves', number: 5, title: 'Dummy valves' }
const said: SearchHit = { lesson: shields, kind: 'caption', heading: 'Why a dummy', anchor: 'clip-1', clip: '7f3c', seconds: 6.9, snippet: 'Look at the ⟦lip at twelve⟧ o’clock' }
const written: SearchHit = { lesson: bowl, kind: 'text', heading: 'Where the ball must touch', anchor: 'where-the-ball-must-touch', clip: null, seconds: null, snippet: 'against the ⟦lip⟧: it climbs <b>out</b>' }

describe('SearchResults', () => {
  it('leads to the heading, or into the film at its second', async () => {
    const list = await mountSuspended(SearchResults, { props: { hits: [said, written], foundFor: 'lip' } })
    expect(list.findAll('a').map(link => link.attributes('href'))).toEqual(['/lessons/dummy-valves?clip=7f3c&t=6', '/lessons/bowl#where-the-ball-must-touch'])
    expect(list.text()).toContain('said in the film at 0:06')
  })
  it('groups by lesson, the lesson with the best hit first', async () => {
    const list = await mountSuspended(SearchResults, { props: { hits: [written, said, { ...written, heading: 'Walls', anchor: 'walls' }], foundFor: 'lip' } })
    expect(list.findAll('h2').map(title => title.text())).toEqual(['7, The bowl', '5, Dummy valves'])
    expect(list.findAll('section')[0]?.findAll('a')).toHaveLength(2)
  })
  it('marks what was found, and shows everything else as text', async () => {
    const list = await mountSuspended(SearchResults, { props: { hits: [written], foundFor: 'lip' } })
    expect(list.findAll('mark').map(mark => mark.text())).toEqual(['lip'])
    expect(list.text()).toContain('it climbs <b>out</b>')
    expect(list.find('b b').exists()).toBe(false)
  })
  it('says what was found, that nothing was, or that the spelling was another', async () => {
    const says = async (hits: SearchHit[], spelling = false) => (await mountSuspended(SearchResults, { props: { hits, foundFor: 'pinsh', spelling } })).get('[role="status"]').text()
    expect(await says([written])).toBe('1 spot for “pinsh”')
    expect(await says([])).toMatch(/^Nothing for “pinsh”/)
    expect(await says([written, said], true)).toBe('Nothing stands there as “pinsh”; 2 spots with words near it')
  })
})

describe('snippetPieces', () => {
  it('takes brackets without their other half for text', () => {
    expect(snippetPieces('a ⟦b⟧ c ⟧ d ⟦ e')).toEqual([{ text: 'a ', found: false }, { text: 'b', found: true }, { text: ' c  d  e', found: false }])
  })
})
describe('hitPath', () => {
  it('opens a film at its beginning when the second is not known', () => {
    expect(hitPath({ lesson: bowl, anchor: '', clip: 'x', seconds: null })).toBe('/lessons/bowl?clip=x&t=0')
    expect(hitPath({ lesson: bowl, anchor: '', clip: null, seconds: null })).toBe('/lessons/bowl')
  })
})
describe('clock times', () => {
  it('writes seconds as people say them, and reads them back', () => {
    expect([0, 9.9, 75, 3600, 3725].map(clockTime)).toEqual(['0:00', '0:09', '1:15', '1:00:00', '1:02:05'])
    expect(['0:09', '1:15', '1:02:05', '75', '4.5', '0:04,5'].map(readClockTime)).toEqual([9, 75, 3725, 75, 4.5, 4.5])
  })
  it('does not read what is no time', () => {
    expect(['', 'soon', '1:60', '1:2:3:4', '-3', '1e9', 'NaN', '1:75.0'].map(readClockTime)).toEqual(Array(8).fill(undefined))
  })
})
