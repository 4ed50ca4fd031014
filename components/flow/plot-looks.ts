/** How each run of a plot is drawn: colour, dash and point shape together, so that any one of them is enough. */
export interface RunLook { colour: string, dash: string, width: number, shape: number }

const others: RunLook[] = [
  { colour: 'text-iron-mid', dash: '6 4', width: 1.6, shape: 1 },
  { colour: 'text-curve-b', dash: '2 3', width: 1.6, shape: 2 },
  { colour: 'text-curve-c', dash: '9 3 2 3', width: 1.6, shape: 3 },
  { colour: 'text-iron', dash: '4 2', width: 1.6, shape: 4 },
  { colour: 'text-curve-b', dash: '', width: 1.6, shape: 5 },
]

/** The last run is the one that counts now: blue, whole and thick. Those before it are dashed. */
export function lookOf(at: number, count: number): RunLook {
  if (at === count - 1) return { colour: 'text-layout', dash: '', width: 2.4, shape: 0 }
  return others[at % others.length] ?? { colour: 'text-iron-mid', dash: '6 4', width: 1.6, shape: 1 }
}

/** Places on a plot, to a tenth of a pixel: server and browser may differ in the last digit, and no eye sees it. */
export function toTenth(from: number, to: number): (share: number) => number {
  return share => Math.round((from + (to - from) * share) * 10) / 10
}
