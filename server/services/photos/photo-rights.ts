import type { Actor } from '#server/utils/actor'
import { hasRole } from '#server/utils/actor'

/**
 * Which photos of a head somebody who sees the head may look at: its student and its instructors all of them, the safety officer the
 * view of bench and person, the office none.
 */
export function maySeePhoto(actor: Actor, photo: { view: string, studentId: string, taught: boolean }): boolean {
  if (photo.studentId === actor.id || photo.taught) return true
  return hasRole(actor, 'safety') && photo.view === 'view-13'
}
