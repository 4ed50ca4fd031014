import type { BenchPlace } from '#server/db/entities/BenchPlace'

/** A place's columns that start empty. */
export const emptyPlace = {
  person: null, note: '', slot: null, listNumber: null, askedAt: null, openedAt: null, offeredAt: null, heldUntil: null, depositPaidAt: null, confirmedAt: null, movedFromId: null,
  endedAt: null, endedBecause: null, finishedAt: null, accessUntil: null,
} satisfies Partial<Record<keyof BenchPlace, null | ''>>
