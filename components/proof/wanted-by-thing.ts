import type { WantedView } from '#shared/contract/views'
import { thingOf } from './thing-of'

/** Wanted proof grouped by what it is (the view, the quantity), in the order it was asked for. */
export function wantedByThing(wanted: readonly WantedView[], kind: WantedView['kind']): { key: string, title: string, wants: WantedView[], open: number }[] {
  const groups = new Map<string, { key: string, title: string, wants: WantedView[], open: number }>()
  for (const want of wanted) {
    if (want.kind !== kind) continue
    const key = want.view ?? want.quantity ?? kind
    const group = groups.get(key) ?? { key, title: thingOf(want), wants: [], open: 0 }
    group.wants.push(want)
    group.open += Math.max(0, want.count - want.have)
    groups.set(key, group)
  }
  return [...groups.values()]
}
