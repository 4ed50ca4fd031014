import type { WantedView } from '#shared/contract/views'
import { quantityInWords } from '#shared/domain/rubric/words'

/** What a piece of proof is, without where: "Seat close-up", "Seat land", "Flow sheet". */
export function thingOf(want: Pick<WantedView, 'kind' | 'viewName' | 'quantity' | 'title'>): string {
  if (want.viewName) return want.viewName
  const words = want.quantity ? quantityInWords(want.quantity) : want.kind === 'flow-sheet' ? 'flow sheet' : want.title
  return `${words[0]?.toUpperCase() ?? ''}${words.slice(1)}`
}
