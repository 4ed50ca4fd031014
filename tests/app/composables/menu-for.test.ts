import { describe, expect, it } from 'vitest'
import { menuFor, type MenuRole } from '~/composables/menu-for'

const words = (roles: MenuRole[], exists: (path: string) => boolean = () => true) => menuFor(roles, exists).map(item => item.word)

describe('menuFor', () => {
  it.each<[MenuRole, string[]]>([
    ['student', ['My bench', 'Route card', 'Lessons', 'Feedback']],
    ['instructor', ['Review queue', 'Shop board', 'Lessons', 'Rubrics', 'Bench book']],
    ['admin', ['Places', 'Money book', 'People', 'Records']],
    ['alumni', ['Shelf', 'My record']],
    ['safety', ['Clearances', 'Exposure book']],
  ])('gives %s the words of the design', (role, menu) => {
    expect(words([role])).toEqual(menu)
  })
  it('names a screen once for somebody with two roles', () => {
    expect(words(['student', 'instructor']).filter(word => word === 'Lessons')).toHaveLength(1)
    expect(words(['student', 'instructor'])[0]).toBe('Review queue')
  })
  it('leaves out what leads nowhere yet, and gives nobody nothing', () => {
    expect(words(['student'], path => path !== '/feedback')).toEqual(['My bench', 'Route card', 'Lessons'])
    expect(words([])).toEqual([])
  })
})
