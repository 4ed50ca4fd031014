import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import Conflict from '~/components/lessons/Conflict.vue'
import { compareLines, linesOf } from '~/components/lessons/compare-lines'
import { withoutEmptyEnd } from '~/components/lessons/document-path'
import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'

const words = (text: string): LessonNode => ({ type: 'text', text })
const paragraph = (text: string): LessonNode => ({ type: 'paragraph', ...(text ? { content: [words(text)] } : {}) })
const doc = (...content: LessonNode[]): LessonDocument => ({ type: 'doc', content })

describe('linesOf', () => {
  it('writes every block so that a difference in it is seen', () => {
    expect(linesOf({ title: 'The bowl', document: doc(
      { type: 'heading', attrs: { level: 3, id: 'walls' }, content: [words('Walls')] },
      { type: 'caution', content: [paragraph('Eyes on.'), paragraph('Ears on.')] },
      { type: 'steps', content: [{ type: 'step', attrs: { cannotBeUndone: true }, content: [paragraph('Blend.')] }, { type: 'step', attrs: { cannotBeUndone: false }, content: [paragraph('Wipe.')] }] },
      { type: 'figure', attrs: { asset: null, drawing: 'bowl', alt: '', caption: 'Section' } },
      { type: 'clip', attrs: { asset: 'x', start: 4, end: null, caption: 'The ball' } },
      { type: 'limit', attrs: { criterion: 'W-01' } },
    ) })).toEqual(['The bowl', '### Walls', 'Caution: Eyes on.', 'Caution: Ears on.', 'Stroke, cannot be undone: Blend.', 'Stroke: Wipe.', 'Picture: not described. Section', 'Clip: The ball, 4 s to its end', 'Limit: W-01'])
  })
})

describe('compareLines', () => {
  it('sets apart what only one of two texts has, in its order', () => {
    const { one, other } = compareLines(['a', 'b', 'c', 'd'], ['a', 'x', 'c', 'y', 'd'])
    expect(one.map(line => (line.only ? `!${line.text}` : line.text))).toEqual(['a', '!b', 'c', 'd'])
    expect(other.map(line => (line.only ? `!${line.text}` : line.text))).toEqual(['a', '!x', 'c', '!y', 'd'])
  })
  it('shows both whole, whatever they have in common', () => {
    for (const [left, right] of [[[], ['a']], [['a'], []], [['a', 'a', 'a'], ['a']], [['b', 'a'], ['a', 'b']]] as const) {
      const { one, other } = compareLines(left, right)
      expect([one.map(line => line.text), other.map(line => line.text)]).toEqual([left, right])
      expect(one.filter(line => !line.only)).toHaveLength(other.filter(line => !line.only).length)
    }
  })
})

describe('Conflict', () => {
  it('shows both texts side by side and asks which stays', async () => {
    const box = await mountSuspended(Conflict, { props: { theirs: { slug: 'bowl', number: 7, revision: 4, title: 'The bowl', document: doc(paragraph('Marit wrote this')), savedBy: 'Marit', savedAt: '2026-03-26T19:40:00Z', publishedVersion: 1 }, mine: { title: 'The bowl', document: doc(paragraph('Hanne wrote this')) } } })
    expect(box.get('[aria-label="Their text"]').text()).toContain('Marit wrote this')
    expect(box.get('[aria-label="Your text"]').text()).toContain('Hanne wrote this')
    expect(box.text()).toContain('Marit saved this lesson meanwhile')
    for (const [word, event] of [['Take theirs', 'takeTheirs'], ['Keep mine', 'keepMine']] as const) {
      await box.findAll('button').find(button => button.text().startsWith(word))!.trigger('click')
      expect(box.emitted(event)).toHaveLength(1)
    }
  })
})

describe('what an editor needs of a document', () => {
  it('leaves out the empty lines an editor puts at the end, and keeps one of an empty lesson', () => {
    expect(withoutEmptyEnd(doc(paragraph('a'), paragraph(''), paragraph(''))).content).toEqual([paragraph('a')])
    expect(withoutEmptyEnd(doc(paragraph(''))).content).toEqual([paragraph('')])
    expect(withoutEmptyEnd(doc(paragraph(''), paragraph('a'))).content).toHaveLength(2)
  })
})
