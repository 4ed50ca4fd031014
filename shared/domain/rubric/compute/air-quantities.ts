import { airDensity } from '../../airflow/air-density'
import { changeAtLift } from '../../airflow/change-per-lift'
import { curtainCoefficient } from '../../airflow/curtain-coefficient'
import { exhaustIntakeRatio } from '../../airflow/exhaust-intake-ratio'
import { flowLossVerdict } from '../../airflow/flow-loss-verdict'
import { flowRepeatability } from '../../airflow/flow-repeatability'
import type { FlowRun } from '../../airflow/flow-run'
import { flowToOneBasis } from '../../airflow/flow-to-one-basis'
import { flowUncertainty } from '../../airflow/flow-uncertainty'
import { idealVelocity } from '../../airflow/ideal-velocity'
import { inletMachIndex } from '../../airflow/inlet-mach-index'
import { isentropicExpansionFactor } from '../../airflow/isentropic-expansion-factor'
import { isentropicVelocity } from '../../airflow/isentropic-velocity'
import { liftWeightedFlow } from '../../airflow/lift-weighted-flow'
import { liftZero } from '../../airflow/lift-zero'
import { meanPistonSpeed } from '../../airflow/mean-piston-speed'
import { namedLift } from '../../airflow/named-lift'
import { orificeMassFlow, type Taps } from '../../airflow/orifice-plate'
import { pchip } from '../../airflow/pchip'
import { plateDifference } from '../../airflow/plate-difference'
import { smallestOpening } from '../../airflow/smallest-opening'
import { smallestOpeningCoefficient } from '../../airflow/smallest-opening-coefficient'
import type { Checked, Computable, ComputeInput, Computed } from './computable'

const number = (name: string, unit: string, least: number, most: number, optional = false): ComputeInput => ({ name, kind: 'number', unit, least, most, ...(optional ? { optional } : {}) })
const list = (name: string, unit: string, least: number, most: number, fewest: number, longest = 200): ComputeInput => ({ name, kind: 'numbers', unit, least, most, fewest, longest })

const one = (value: number, unit: string, what: string, sum: string, u?: number): Computed =>
  ({ value, unit, ...(u === undefined ? {} : { standardUncertainty: u }), trace: [{ what, sum, gives: `${figure(value)} ${unit}`.trim() }] })
const figure = (value: number): string => String(Number(value.toPrecision(7)))

const cfm = (name: string): ComputeInput => list(name, 'cfm', 0.01, 2000, 3, 60)
const lifts = (name: string): ComputeInput => list(name, 'mm', 0.01, 60, 3, 60)

/** A run from two lists of one length, rising. */
function run(given: Checked, liftName: string, flowName: string): FlowRun {
  const [liftsMm, flows] = [given.numbers(liftName), given.numbers(flowName)]
  if (liftsMm.length !== flows.length) throw new RangeError(`${liftName} and ${flowName} must be of one length`)
  const points = liftsMm.map((liftMm, index) => {
    const cfm28 = flows[index] as number
    return { liftMm, cfm28, expandedUncertainty: flowUncertainty(cfm28, 'change'), pressurePa: null }
  }).sort((a, b) => a.liftMm - b.liftMm)
  if (points.some((point, index) => point.liftMm === points[index - 1]?.liftMm)) throw new RangeError(`${liftName} must not name a lift twice`)
  return { cylinder: null, side: null, points, missing: [] }
}

const seat: readonly ComputeInput[] = [
  number('seatOuterMm', 'mm', 5, 120), number('stemMm', 'mm', 1, 30), number('seatWidthMm', 'mm', 0.1, 10), number('seatDeg', 'degrees', 15, 60),
  number('throatMm', 'mm', 5, 120, true), number('liftMm', 'mm', 0.01, 60),
]
const seatOf = (given: Checked) => ({
  seatOuterMm: given.number('seatOuterMm'), stemMm: given.number('stemMm'), seatWidthMm: given.number('seatWidthMm'), seatDeg: given.number('seatDeg'), throatMm: given.numberOrNull('throatMm'),
})

/** Quantities of air and flow that can be checked by hand. */
export const airQuantities: readonly Computable[] = [
  {
    name: 'air-density', title: 'Density of moist air', unit: 'kg/m3', source: 'CIPM-2007 (Picard et al., Metrologia 45, 2008)',
    inputs: [number('temperatureC', '°C', -20, 60), number('pressurePa', 'Pa', 50_000, 120_000), number('relativeHumidity', '', 0, 1)],
    compute: (given) => {
      const air = airDensity({ temperatureC: given.number('temperatureC'), pressurePa: given.number('pressurePa'), relativeHumidity: given.number('relativeHumidity') })
      return { value: air.densityKgPerM3, unit: 'kg/m3', trace: [
        { what: 'saturation vapour pressure', sum: 'exp(A T^2 + B T + C + D / T)', gives: `${air.saturationPressurePa.toFixed(2)} Pa` },
        { what: 'mole fraction of vapour', sum: 'humidity x enhancement x saturation / pressure', gives: figure(air.vapourFraction) },
        { what: 'compressibility', sum: 'CIPM-2007, equation of Z', gives: figure(air.compressibility) },
        { what: 'density', sum: 'p Ma / (Z R T) x (1 - xv (1 - Mv / Ma))', gives: `${figure(air.densityKgPerM3)} kg/m3` },
      ] }
    },
  },
  {
    name: 'flow-at-28', title: 'A reading brought to 28 inH2O and air of 1.2041 kg/m3', unit: 'cfm', source: 'handbook 4.2',
    inputs: [number('flowCfm', 'cfm', 0, 2000), number('leakCfm', 'cfm', 0, 200, true), number('pressurePa', 'Pa', 100, 30_000), number('airDensity', 'kg/m3', 0.5, 2), number('plateRatio', '', 0.5, 2, true)],
    compute: (given) => {
      const { cfm28, trace } = flowToOneBasis({ flowCfm: given.number('flowCfm'), leakCfm: given.numberOrNull('leakCfm') ?? 0, pressurePa: given.number('pressurePa'), airDensity: given.number('airDensity'), plateRatio: given.numberOrNull('plateRatio') ?? 1 })
      return cfm28 < 0 ? { value: cfm28, unit: 'cfm', trace } : { value: cfm28, unit: 'cfm', standardUncertainty: flowUncertainty(cfm28, 'absolute') / 2, trace }
    },
  },
  {
    name: 'flow-change', title: 'Change of flow at one lift', unit: 'cfm', source: 'handbook 2.0 and 3.5',
    inputs: [number('nowCfm28', 'cfm', 0.01, 2000), number('beforeCfm28', 'cfm', 0.01, 2000)],
    compute: (given) => {
      const single = (cfm28: number): FlowRun => ({ cylinder: null, side: null, missing: [], points: [{ liftMm: 1, cfm28, expandedUncertainty: flowUncertainty(cfm28, 'change'), pressurePa: null }] })
      const change = changeAtLift(single(given.number('nowCfm28')), single(given.number('beforeCfm28')), 1)
      if (!change) throw new RangeError('the two flows cannot be compared')
      return { value: change.changeCfm, unit: 'cfm', standardUncertainty: change.expandedUncertainty / 2, trace: change.trace }
    },
  },
  {
    name: 'flow-loss', title: 'Verdict over all lifts: 0 accept, 1 borderline, 2 reject', unit: '', source: 'handbook 3.2',
    inputs: [list('changesCfm', 'cfm', -500, 500, 1, 60), list('expandedUncertainties', 'cfm', 0.001, 500, 1, 60)],
    compute: (given) => {
      const [changes, doubts] = [given.numbers('changesCfm'), given.numbers('expandedUncertainties')]
      if (changes.length !== doubts.length) throw new RangeError('give one uncertainty for each change')
      const verdict = flowLossVerdict(changes.map((changeCfm, index) => ({ liftMm: index + 1, nowCfm28: 0, beforeCfm28: 0, changeCfm, expandedUncertainty: doubts[index] as number, changePercent: 0, expandedUncertaintyPercent: 0, verdict: 'no clear change', trace: [] })))
      return { value: ['accept', 'borderline', 'reject'].indexOf(verdict.state), unit: '', trace: [{ what: 'two neighbours lost beyond U, or one beyond 1.4 U, is a reject', sum: `lost: ${verdict.liftsMm.map(lift => `no. ${lift}`).join(', ') || 'none'}`, gives: verdict.state }] }
    },
  },
  {
    name: 'curtain-coefficient', title: 'Discharge coefficient on the curtain', unit: '', source: 'handbook 3.5',
    inputs: [number('cfm28', 'cfm', 0.01, 2000), number('valveMm', 'mm', 5, 120), number('liftMm', 'mm', 0.01, 60)],
    compute: given => one(curtainCoefficient(given.number('cfm28'), given.number('valveMm'), given.number('liftMm')), '', 'effective area over pi x valve x lift', `${given.number('cfm28')} cfm over pi x ${given.number('valveMm')} x ${given.number('liftMm')} mm2 at 107.63 m/s`),
  },
  {
    name: 'smallest-opening', title: 'Smallest geometric opening of a valve', unit: 'mm2', source: 'Heywood 6.3 (from memory); handbook 8.5', inputs: seat,
    compute: (given) => {
      const found = smallestOpening(seatOf(given), given.number('liftMm'))
      return one(found.areaMm2, 'mm2', 'least of the three ranges, capped by the throat', `range: ${found.regime}`)
    },
  },
  {
    name: 'smallest-opening-coefficient', title: 'Discharge coefficient on the smallest opening', unit: '', source: 'handbook 3.5 and 8.5', inputs: [number('cfm28', 'cfm', 0.01, 2000), ...seat],
    compute: given => one(smallestOpeningCoefficient(given.number('cfm28'), seatOf(given), given.number('liftMm')), '', 'effective area over smallest opening', `${given.number('cfm28')} cfm at 107.63 m/s over ${figure(smallestOpening(seatOf(given), given.number('liftMm')).areaMm2)} mm2`),
  },
  {
    name: 'ideal-velocity', title: 'Speed of a loss-free jet, air not expanding', unit: 'm/s', source: 'Bernoulli; handbook 8',
    inputs: [number('pressurePa', 'Pa', 1, 100_000), number('densityKgPerM3', 'kg/m3', 0.1, 20)],
    compute: given => one(idealVelocity(given.number('pressurePa'), given.number('densityKgPerM3')), 'm/s', 'sqrt(2 dp / rho)', `sqrt(2 x ${given.number('pressurePa')} / ${given.number('densityKgPerM3')})`),
  },
  {
    name: 'isentropic-velocity', title: 'Speed of a loss-free jet, expansion counted', unit: 'm/s', source: 'Heywood, appendix C (from memory)',
    inputs: [number('upstreamPa', 'Pa', 1000, 1_000_000), number('differencePa', 'Pa', 1, 999_999), number('kelvin', 'K', 150, 1500), number('gasConstant', 'J/(kg K)', 50, 5000, true), number('gamma', '', 1.01, 1.8, true)],
    compute: given => one(isentropicVelocity(given.number('upstreamPa'), given.number('differencePa'), given.number('kelvin'), given.numberOrNull('gasConstant') ?? 287.05, given.numberOrNull('gamma') ?? 1.4), 'm/s', 'sqrt(2 g / (g - 1) R T (1 - r^((g - 1) / g)))', `r = 1 - ${given.number('differencePa')} / ${given.number('upstreamPa')}`),
  },
  {
    name: 'isentropic-flow', title: 'Ideal mass flow with expansion over that without', unit: '', source: 'Heywood, appendix C (from memory)',
    inputs: [number('upstreamPa', 'Pa', 1000, 1_000_000), number('differencePa', 'Pa', 1, 999_999), number('gamma', '', 1.01, 1.8, true)],
    compute: given => one(isentropicExpansionFactor(given.number('upstreamPa'), given.number('differencePa'), given.numberOrNull('gamma') ?? 1.4), '', 'expansion factor', `r = 1 - ${given.number('differencePa')} / ${given.number('upstreamPa')}`),
  },
  {
    name: 'orifice-flow', title: 'Mass flow through an orifice plate', unit: 'kg/s', source: 'ISO 5167-1 and -2',
    inputs: [number('pipeM', 'm', 0.01, 2), number('boreM', 'm', 0.001, 2), { name: 'taps', kind: 'choice', choices: ['corner', 'flange', 'D and D/2'] }, number('differencePa', 'Pa', 1, 1_000_000), number('upstreamPa', 'Pa', 1000, 20_000_000), number('densityKgPerM3', 'kg/m3', 0.01, 2000), number('viscosityPaS', 'Pa s', 1e-7, 10), number('kappa', '', 1.01, 1.8, true), { name: 'fluid', kind: 'choice', choices: ['gas', 'liquid'], optional: true }],
    compute: (given) => {
      const plate = { pipeM: given.number('pipeM'), boreM: given.number('boreM'), taps: given.text('taps') as Taps }
      if (given.number('differencePa') >= given.number('upstreamPa')) throw new RangeError('the pressure difference must be below the upstream pressure')
      const liquid = given.textOrNull('fluid') === 'liquid'
      const flow = orificeMassFlow(plate, { differencePa: given.number('differencePa'), upstreamPa: given.number('upstreamPa'), densityKgPerM3: given.number('densityKgPerM3'), viscosityPaS: given.number('viscosityPaS'), kappa: given.numberOrNull('kappa') ?? 1.4, incompressible: liquid })
      return one(flow, 'kg/s', 'C / sqrt(1 - b^4) x e x pi / 4 d^2 x sqrt(2 dp rho), C found with its Reynolds number', `b = ${figure(plate.boreM / plate.pipeM)}`)
    },
  },
  {
    name: 'interpolate-flow', title: 'Flow at a lift between readings, by a curve that never overshoots', unit: 'cfm', source: 'Fritsch and Butland 1984',
    inputs: [list('liftsMm', 'mm', 0, 60, 2, 60), list('flows', 'cfm', 0, 2000, 2, 60), number('liftMm', 'mm', 0, 60)],
    compute: given => one(pchip(given.numbers('liftsMm'), given.numbers('flows')).at(given.number('liftMm')), 'cfm', 'piecewise cubic through the points, monotone', `at ${given.number('liftMm')} mm, ${given.numbers('liftsMm').length} points`),
  },
  {
    name: 'lift-weighted-flow', title: 'Flow averaged over the time the valve is open', unit: 'cfm', source: 'handbook 8.6',
    inputs: [lifts('liftsMm'), cfm('cfm28'), number('maxLiftMm', 'mm', 0.5, 60)],
    compute: (given) => {
      const weighted = liftWeightedFlow(run(given, 'liftsMm', 'cfm28'), given.number('maxLiftMm'))
      if (!weighted) throw new RangeError('the readings stop short of 95 % of the greatest lift')
      return { value: weighted.cfm28, unit: 'cfm', standardUncertainty: weighted.expandedUncertainty / 2, trace: weighted.trace }
    },
  },
  {
    name: 'exhaust-intake-ratio', title: 'Exhaust over intake flow, weighted by the lift curve', unit: '%', source: 'handbook 3.5',
    inputs: [lifts('exhaustLiftsMm'), cfm('exhaustCfm28'), lifts('intakeLiftsMm'), cfm('intakeCfm28'), number('maxLiftMm', 'mm', 0.5, 60)],
    compute: (given) => {
      const ratio = exhaustIntakeRatio(run(given, 'exhaustLiftsMm', 'exhaustCfm28'), run(given, 'intakeLiftsMm', 'intakeCfm28'), given.number('maxLiftMm'))
      if (!ratio.weighted) throw new RangeError('the readings stop short of 95 % of the greatest lift')
      return { value: ratio.weighted.percent, unit: '%', standardUncertainty: ratio.weighted.expandedUncertainty / 2, trace: [
        ...ratio.perLift.map(each => ({ what: `at ${each.liftMm} mm`, sum: 'exhaust over intake', gives: `${each.percent.toFixed(1)} %` })),
        { what: 'weighted by the lift curve', sum: 'mean over the open angle', gives: `${ratio.weighted.percent.toFixed(1)} %` },
      ] }
    },
  },
  {
    name: 'flow-repeatability', title: 'Scatter of two to six runs of one port, pooled over the lifts', unit: '%', source: 'ISO 5725 idea (from memory); handbook 8.10',
    inputs: [list('liftsMm', 'mm', 0.01, 60, 1, 60), ...[1, 2].map(n => list(`run${n}Cfm28`, 'cfm', 0.01, 2000, 1, 60)), ...[3, 4, 5, 6].map((n): ComputeInput => ({ name: `run${n}Cfm28`, kind: 'numbers', unit: 'cfm', least: 0.01, most: 2000, fewest: 1, longest: 60, optional: true }))],
    compute: (given) => {
      const names = [1, 2, 3, 4, 5, 6].map(n => `run${n}Cfm28`).filter(name => given.numbersOrNull(name) !== null)
      const repeat = flowRepeatability(names.map(name => run(given, 'liftsMm', name)))
      if (!repeat) throw new RangeError('the runs have no lift in common')
      return { value: repeat.percent, unit: '%', trace: [
        { what: 'pooled standard deviation, per cent of the mean at each lift', sum: `${names.length} runs, ${repeat.degreesOfFreedom} degrees of freedom`, gives: `${repeat.percent.toFixed(3)} %` },
        { what: 'repeat limit', sum: `2.8 x ${repeat.percent.toFixed(3)}`, gives: `${repeat.limitPercent.toFixed(2)} %` },
      ] }
    },
  },
  {
    name: 'lift-zero', title: 'Lift at which the line through the two lowest readings meets no flow', unit: 'mm', source: 'handbook 4.4',
    inputs: [list('liftsMm', 'mm', 0.01, 60, 2, 60), list('cfm28', 'cfm', 0.01, 2000, 2, 60), number('valveMm', 'mm', 5, 120, true)],
    compute: (given) => {
      const zero = liftZero(run(given, 'liftsMm', 'cfm28'), given.numberOrNull('valveMm'))
      if (!zero) throw new RangeError('the two lowest lifts do not rise, or lie above 0.12 of the valve')
      return { value: zero.liftMm, unit: 'mm', trace: zero.trace }
    },
  },
  {
    name: 'plate-difference', title: 'Plate reading against its nominal', unit: '%', source: 'handbook 4.2',
    inputs: [number('reading', '', 0.001, 1e6), number('nominal', '', 0.001, 1e6)],
    compute: given => one(plateDifference(given.number('reading'), given.number('nominal')), '%', 'reading over nominal, less one', `100 x (${given.number('reading')} / ${given.number('nominal')} - 1)`),
  },
  {
    name: 'named-lift', title: 'A lift named as a share of the valve', unit: 'mm', source: 'handbook 3, lift rule',
    inputs: [number('valveMm', 'mm', 5, 120), number('share', '', 0.001, 1)],
    compute: given => one(namedLift(given.number('valveMm'), given.number('share')), 'mm', 'valve x share', `${given.number('valveMm')} x ${given.number('share')}`),
  },
  {
    name: 'mean-piston-speed', title: 'Mean piston speed', unit: 'm/s', source: 'definition',
    inputs: [number('strokeM', 'm', 0.001, 3), number('revolutionsPerMinute', '1/min', 1, 30_000)],
    compute: given => one(meanPistonSpeed(given.number('strokeM'), given.number('revolutionsPerMinute')), 'm/s', '2 x stroke x revolutions a second', `2 x ${given.number('strokeM')} x ${given.number('revolutionsPerMinute')} / 60`),
  },
  {
    name: 'inlet-mach-index', title: 'Inlet Mach index (an index, not horsepower)', unit: '', source: 'handbook 8.16, after Taylor (from memory)',
    inputs: [number('boreMm', 'mm', 10, 2000), number('meanPistonSpeedMPerS', 'm/s', 0.01, 60), number('meanEffectiveAreaMm2', 'mm2', 1, 1e6), number('soundSpeedMPerS', 'm/s', 100, 1000)],
    compute: given => one(inletMachIndex({ boreMm: given.number('boreMm'), meanPistonSpeedMPerS: given.number('meanPistonSpeedMPerS'), meanEffectiveAreaMm2: given.number('meanEffectiveAreaMm2'), soundSpeedMPerS: given.number('soundSpeedMPerS') }), '', 'piston speed x piston area / (speed of sound x effective area)', 'Z = Cp Ap / (a Ae)'),
  },
]
