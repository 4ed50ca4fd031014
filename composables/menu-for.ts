export interface MenuItem { word: string, path: string }
export type MenuRole = 'student' | 'alumni' | 'instructor' | 'admin' | 'safety'

/** One menu a role, in the school's own words. */
const menus: Record<MenuRole, MenuItem[]> = {
  student: [
    { word: 'My bench', path: '/bench' },
    { word: 'Route card', path: '/route-card' },
    { word: 'Lessons', path: '/lessons' },
    { word: 'Feedback', path: '/feedback' },
  ],
  instructor: [
    { word: 'Review queue', path: '/review' },
    { word: 'Shop board', path: '/shop-board' },
    { word: 'Lessons', path: '/lessons' },
    { word: 'Rubrics', path: '/rubrics' },
    { word: 'Bench book', path: '/bench-book' },
  ],
  admin: [
    { word: 'Places', path: '/places' },
    { word: 'Money book', path: '/money-book' },
    { word: 'People', path: '/people' },
    { word: 'Records', path: '/records' },
  ],
  alumni: [
    { word: 'Shelf', path: '/shelf' },
    { word: 'My record', path: '/my-record' },
  ],
  safety: [
    { word: 'Clearances', path: '/clearances' },
    { word: 'Exposure book', path: '/exposure-book' },
  ],
}

/** Roles whose work comes first when somebody has several. */
const order: MenuRole[] = ['instructor', 'student', 'alumni', 'admin', 'safety']

/**
 * The menu of somebody with these roles: each word once, in the order of the role that does most.
 * `exists` leaves out a screen this version does not have yet, so that no word leads nowhere.
 */
export function menuFor(roles: readonly MenuRole[], exists: (path: string) => boolean): MenuItem[] {
  const items = order.filter(role => roles.includes(role)).flatMap(role => menus[role])
  return items.filter((item, at) => exists(item.path) && items.findIndex(other => other.path === item.path) === at)
}

/** Roles of a person as the menu knows them: a student all of whose places are finished is alumni, and one who came back for another course is both. */
export function menuRolesOf(person: { roles: readonly Exclude<MenuRole, 'alumni'>[], places: readonly string[] }): MenuRole[] {
  const finished = person.places.includes('finished')
  const atTheBench = !finished || person.places.some(state => currentStates.includes(state))
  return person.roles.flatMap((role): MenuRole[] => role === 'student' ? [...(atTheBench ? ['student' as const] : []), ...(finished ? ['alumni' as const] : [])] : [role])
}

/** States of a place that is being used, or soon will be. */
const currentStates = ['deposit-paid', 'confirmed', 'here']
