import { p } from '@mikro-orm/core'

/** Primary key made by the application, so that it is known before the insert. */
export const id = () => p.uuid().primary().onCreate(() => crypto.randomUUID())

/** 8-byte column typed as a number; `p.float()` alone makes a 4-byte one in PostgreSQL. */
export const real = () => p.float().columnType('double precision')

/** An instant, kept with its zone. */
export const instant = () => p.datetime().columnType('timestamptz')

// JSON columns say `.trackChanges(false)`: what is in them is written once with its row, and comparing it at every flush costs more
// than all the rest of a request.
