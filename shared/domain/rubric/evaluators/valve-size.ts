import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { sameSpot } from '../same-spot'

/** Whether every valve is measured whole: each quantity and spot the criterion wants, at every port the part covers. */
export const valveSize: Evaluator = (evidence, criterion) => {
  const wanted = criterion.wants.filter(want => want.kind === 'reading' && want.quantity !== undefined)
  const measured = evidence.ports.filter(port => wanted.every((want) => {
    const read = readingsOf(evidence, { quantity: want.quantity ?? '', unit: port }).filter(one => one.side === port.side && one.cylinder === port.cylinder)
    return want.places === undefined ? read.length > 0 : want.places.every(place => read.some(one => sameSpot(one.spot, place)))
  }))
  if (measured.length === 0) return { notAssessed: 'No valve is measured whole yet: head, stem at three heights, margin and run-out.' }
  const [n, m] = [measured.length, evidence.ports.length]
  return {
    values: [{
      value: n === m ? 1 : 0, unit: 'yes/no', standardUncertainty: null, degreesOfFreedom: null, at: null, liftMm: null,
      trace: [{ what: 'valves measured whole', sum: `${n} of ${m}`, gives: n === m ? 'all' : 'not all' }],
    }],
    verdict: n === m ? 'accept' : 'borderline',
    countsReadings: true,
    fill: () => ({ n: String(n), m: String(m) }),
  }
}
