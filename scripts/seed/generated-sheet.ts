import { airDensity } from '#shared/domain/airflow/air-density'
import { referenceBasis } from '#shared/domain/airflow/reference-basis'
import type { Side } from '#shared/domain/units/port'
import type { StoryCard } from './iron'
import { steadyNoise } from './steady-noise'

export interface GeneratedRun {
  head: string
  operator: string
  bench: string
  /** ISO date. */
  date: string
  cylinder: number
  side: Side
  stage: 'base' | 'bowl' | 'port'
  /** Which of several runs, each from a fresh set-up. */
  run: number
  /** Curve it lies on: the casting's usual one, or that of a sheet it repeats. cfm at 28 inH2O. */
  points?: readonly { liftMm: number, cfm28: number }[]
  entry: string
  pipe: string
}

const stageWords = { base: 'Baseline', bowl: 'After bowl', port: 'After port' }
const air = { celsius: 20.4, hectopascal: 1011, humidity: 47 }
const plate = { nominal: 150, today: 150.1 }
const leakCfm = 0.3

/** Scatter of one reading, and of one set-up against another, as shares of the flow. */
const scatter = { reading: 0.0022, setUp: 0.0015 }

/**
 * A flow sheet the handbook gives no file for: the curve brought back to what the bench would have shown that evening, with the
 * scatter of an ordinary bench. It says in its header that it was generated.
 */
export function generatedSheet(card: StoryCard, given: GeneratedRun): { filename: string, body: Buffer } {
  const valve = card.valves[given.side]
  const usual = card.usual_flow
  const points = given.points ?? usual.lift_mm.map((liftMm, index) => ({ liftMm, cfm28: usual[given.side][given.stage][index] ?? 0 }))
  const rho = airDensity({ temperatureC: air.celsius, pressurePa: air.hectopascal * 100, relativeHumidity: air.humidity / 100 }).densityKgPerM3
  const back = plate.today / plate.nominal / Math.sqrt(rho / referenceBasis.densityKgPerM3)
  const noise = (liftMm: number | null) => steadyNoise(given.head, given.cylinder, given.side, given.stage, given.run, liftMm)
  const received = given.stage === 'base'
  const rows = points.map(({ liftMm, cfm28 }) => {
    const shown = cfm28 * (1 + scatter.setUp * noise(null) + scatter.reading * noise(liftMm)) * back + leakCfm
    return `${liftMm.toFixed(2)},28.0,${shown.toFixed(1)},`
  })
  const header: [string, string | number][] = [
    ['Form', 'flow sheet'], ['Remarks', `Generated for the demo school; run ${given.run}`], ['Bench', given.bench], ['Date', given.date], ['Operator', given.operator], ['Head', given.head], ['Cylinder', given.cylinder],
    ['Port side', given.side === 'intake' ? 'Intake' : 'Exhaust'], ['Stage', stageWords[given.stage]], ['Valve dia mm', valve.head.toFixed(1)], ['Stem dia mm', valve.stem.toFixed(1)], ['Seat angle deg', valve.seat_deg],
    ['Throat dia mm', (received ? valve.throat_received : valve.throat_target).toFixed(1)], ['Seat land mm', received ? '2.0' : '1.65'], ['Entry', given.entry], ['Exhaust pipe', given.pipe], ['Test pressure inH2O', '28.0'],
    ['Flow basis', 'actual ambient'], ['Ambient C', air.celsius], ['Baro hPa', air.hectopascal], ['RH %', air.humidity], ['Leak valve closed cfm', leakCfm], ['Plate nominal cfm', plate.nominal.toFixed(1)], ['Plate today cfm', plate.today.toFixed(1)],
  ]
  const text = [...header.map(([key, value]) => `${key},${value}`), '', 'Lift mm,Test P inH2O,Flow cfm,Note', ...rows, ''].join('\n')
  return { filename: `generated_${given.head}_c${given.cylinder}_${given.side}_${given.stage}_run${given.run}.csv`.toLowerCase(), body: Buffer.from(text, 'utf8') }
}
