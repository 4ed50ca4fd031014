import { z } from 'zod'
import { readPageToken, writePageToken } from './page-token'

/** What a list may be ordered by: an SQL expression that is never null, its direction, and the type its key is compared as. */
export interface KeysetOrder { by: string, direction: 'asc' | 'desc', type: 'text' | 'timestamptz' | 'bigint' }

/** A key as the list would have written it: anything else PostgreSQL would refuse, or worse, read otherwise. */
const keyOf = {
  text: z.string().refine(text => text.isWellFormed() && !text.includes('\0')),
  timestamptz: z.string().datetime({ precision: 6 }),
  bigint: z.union([z.number().int(), z.string().regex(/^-?\d{1,18}$/)]),
} satisfies Record<KeysetOrder['type'], z.ZodTypeAny>

/**
 * One page of a list by keyset: the condition that begins after the last row seen, the order, and how the next page is named.
 * Select `${by} as page_key` (a timestamp as ISO text) and `id` with each row; ask for one row more than the page holds.
 *
 * @param idColumn unique, breaks ties: `p.id`
 * @throws {Refusal} page_unknown when `after` is not a page of a list
 */
export function keyset(order: KeysetOrder, idColumn: string, after: string | undefined) {
  const before = after === undefined ? null : readPageToken(after, z.tuple([keyOf[order.type], z.string().uuid()]))
  const sign = order.direction === 'asc' ? '>' : '<'
  const exact = order.type === 'timestamptz' ? `to_char(${order.by} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"')` : order.by
  return {
    select: `${exact} as page_key`,
    where: before ? `(${order.by}, ${idColumn}) ${sign} (?::${order.type}, ?::uuid)` : 'true',
    values: before ? [...before] : [],
    orderBy: `${order.by} ${order.direction}, ${idColumn} ${order.direction}`,
    /** The rows of this page, and the token of the next. */
    cut<Row extends { id: string, page_key: string | number }>(rows: readonly Row[], limit: number): { rows: Row[], next: string | null } {
      const shown = rows.slice(0, limit)
      const last = shown.at(-1)
      return { rows: shown, next: rows.length > limit && last ? writePageToken([last.page_key, last.id]) : null }
    },
  }
}

/** Text for `ilike`: what was typed, anywhere, with its own wildcards taken literally. */
export function anywhere(text: string): string {
  return `%${text.replace(/[\\%_]/g, '\\$&')}%`
}
