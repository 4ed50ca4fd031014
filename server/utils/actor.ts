import type { Role } from '../db/entities/User'

/** Who is asking: the signed-in person as their row stands now, not as a token once said. */
export interface Actor {
  id: string
  name: string
  email: string
  roles: Role[]
  unit: 'mm' | 'in'
  sessionId: string
}

export function hasRole(actor: Actor, ...roles: Role[]): boolean {
  return roles.some(role => actor.roles.includes(role))
}
