import type { WantItem } from './want-items'
import { listInWords, quantityInWords, spotInWords, unitInWords, viewNames } from './words'

/** "the photo Seat close-up, cylinder 2 intake", "seat land at 1:30 and 3 o'clock, cylinder 2 intake". */
export function wantInWords(item: Pick<WantItem, 'kind' | 'view' | 'quantity' | 'cylinder' | 'side' | 'spot' | 'when' | 'note'>, spots: readonly string[] = item.spot === null ? [] : [item.spot]): string {
  const what = item.kind === 'photo'
    ? `photo ${viewNames[item.view ?? ''] ?? item.view}`
    : item.kind === 'reading' ? quantityInWords(item.quantity ?? '') : item.kind === 'flow-sheet' ? 'flow sheet' : item.note ?? 'document'
  const where = spots.length === 0 ? '' : ` at ${listInWords(spots.map(spotInWords))}`
  const when = item.when === null ? '' : `, ${item.when} the cut`
  const unit = item.cylinder === null && item.side === null ? '' : `, ${unitInWords(item)}`
  return `${what}${where}${when}${unit}`
}
