/**
 * Whether a JSON value is nested no deeper than that many objects and arrays. Walks it without calling itself, so that a value made to
 * exhaust the stack is only a no.
 *
 * @example
 * isWithinDepth({ content: [{ text: 'a' }] }, 3) // => true
 * isWithinDepth([[[[]]]], 3) // => false
 */
export function isWithinDepth(value: unknown, deepest: number): boolean {
  const open: { value: unknown, depth: number }[] = [{ value, depth: 1 }]
  for (let next = open.pop(); next; next = open.pop()) {
    if (typeof next.value !== 'object' || next.value === null) continue
    if (next.depth > deepest) return false
    for (const inner of Object.values(next.value)) open.push({ value: inner, depth: next.depth + 1 })
  }
  return true
}
