import { describe, expect, it } from 'vitest'
import { menuFor, menuRolesOf, type MenuRole } from '~/composables/menu-for'

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

describe('menuRolesOf', () => {
  it('takes a student with nothing but finished places for alumni', () => {
    expect(menuRolesOf({ roles: ['student'], places: ['finished', 'cancelled'] })).toEqual(['alumni'])
  })
  it('gives both menus to somebody who came back for another course', () => {
    expect(menuRolesOf({ roles: ['student'], places: ['finished', 'confirmed'] })).toEqual(['student', 'alumni'])
  })
  it('leaves everybody else as they are, with or without a place', () => {
    expect(menuRolesOf({ roles: ['student'], places: [] })).toEqual(['student'])
    expect(menuRolesOf({ roles: ['student'], places: ['here'] })).toEqual(['student'])
    expect(menuRolesOf({ roles: ['instructor', 'admin'], places: [] })).toEqual(['instructor', 'admin'])
  })
})
