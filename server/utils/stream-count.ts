import { Refusal } from './refusal'

export interface StreamCount {
  /** Takes one of a person's streams; call the answer once when it ends. @throws {Refusal} too_many_streams */
  take: (personId: string) => () => void
}

/** Counts how many streams each person holds in this process, so that a page left open a hundred times does not keep a hundred connections. */
export function createStreamCount(most: number): StreamCount {
  const held = new Map<string, number>()
  return {
    take(personId) {
      const now = held.get(personId) ?? 0
      if (now >= most) throw new Refusal('too_many_streams')
      held.set(personId, now + 1)
      let given = false
      return () => {
        if (given) return
        given = true
        const left = (held.get(personId) ?? 1) - 1
        if (left > 0) held.set(personId, left)
        else held.delete(personId)
      }
    },
  }
}
