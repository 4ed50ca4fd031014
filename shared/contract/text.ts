import { z } from 'zod'

/** A lone surrogate or NUL cannot be kept by PostgreSQL or read aloud by anybody. */
function isCleanText(text: string): boolean {
  return !text.includes('\0') && text.isWellFormed()
}

/** Text as people write it: trimmed, no NUL, no lone surrogate. */
export const cleanText = (max: number) => z.string().trim().max(max, `at most ${max} characters`).refine(isCleanText, 'has characters that cannot be kept')

/** The same, and not empty. */
export const someText = (max: number) => cleanText(max).refine(text => text.length > 0, 'is empty')
