import type { Side } from '#shared/domain/units/port'

/** Where a result belongs, in words: "cylinder 2 intake, at 12, lift 7.62 mm". Empty for the whole head. */
export function spotWords(result: { cylinder: number | null, side: Side | null, at?: string | null, liftMm?: number | null }): string {
  const port = [result.cylinder === null ? '' : `cylinder ${result.cylinder}`, result.side ?? ''].filter(Boolean).join(' ')
  const at = result.at ? (/^\d{1,2}(:30)?$/.test(result.at) ? `at ${result.at} o’clock` : `at ${result.at}`) : ''
  const lift = result.liftMm === null || result.liftMm === undefined ? '' : `lift ${Number(result.liftMm.toFixed(2))} mm`
  return [port, at, lift].filter(Boolean).join(', ')
}
