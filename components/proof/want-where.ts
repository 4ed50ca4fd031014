import type { WantedView } from '#shared/contract/views'

/** Where a piece of proof belongs, in words: "cylinder 2 intake, 12 o'clock, after". */
export function wantWhere(want: Pick<WantedView, 'cylinder' | 'side' | 'spot' | 'when'>): string {
  const port = [want.cylinder === null ? '' : `cylinder ${want.cylinder}`, want.side ?? ''].filter(Boolean).join(' ')
  const spot = want.spot && /^\d{1,2}(:\d{2})?$/.test(want.spot) ? `${want.spot} o’clock` : want.spot ?? ''
  return [port, spot, want.when ?? ''].filter(Boolean).join(', ')
}
