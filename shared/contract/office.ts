import { z } from 'zod'
import { cleanText, someText } from './text'
import type { PlaceState } from './places'

/** One message of the outbox as the office sees it. */
export interface MailRow { id: string, template: string, to: string, person: { id: string, name: string } | null, subject: string, state: 'waiting' | 'sent' | 'dead', tries: number, problem: string | null, createdAt: string, sentAt: string | null }
export interface PersonDetail { id: string, name: string, email: string, roles: string[], invited: boolean, signedIn: number, places: { id: string, cohort: string, state: PlaceState }[], teaches: { cohort: string, points: string[] }[] }
/** One event of the audit record. `number` is its link in the chain, null until the sealer has seen it. */
export interface AuditRow { id: string, number: number | null, sealed: boolean, at: string, actor: string, action: string, subject: string, detail: string }
export const peopleQuery = z.object({ search: cleanText(100).optional(), role: z.enum(['student', 'instructor', 'admin', 'safety']).optional(), sort: z.enum(['name', 'newest']).default('name'), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })
export const auditQuery = z.object({ search: cleanText(120).optional(), action: cleanText(80).optional(), from: z.string().datetime({ offset: true }).optional(), sort: z.enum(['newest', 'oldest']).default('newest'), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(50) })
export const mailsQuery = z.object({ search: cleanText(100).optional(), state: z.enum(['waiting', 'sent', 'dead']).optional(), template: z.string().max(60).regex(/^[a-z-]+$/).optional(), person: z.string().uuid().optional(), sort: z.enum(['newest', 'oldest']).default('newest'), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })
export type MailsQuery = z.output<typeof mailsQuery>
export const nameInput = z.object({ name: someText(120) }).strict()
export const rolesInput = z.object({ roles: z.array(z.enum(['student', 'instructor', 'admin', 'safety'])).min(1).max(4) }).strict()
