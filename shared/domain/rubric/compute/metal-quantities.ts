import { areaChanges } from '../../geometry/area-changes'
import type { Section } from '../../geometry/assert-sections'
import { bendSpeedRatio } from '../../geometry/bend-speed-ratio'
import { chanceUnder } from '../../geometry/chance-under'
import { compressionRatio, discVolume } from '../../geometry/compression-ratio'
import { landInnerDiameter } from '../../geometry/land-inner-diameter'
import { metalLeft } from '../../geometry/metal-left'
import { pinch } from '../../geometry/pinch'
import { pinchByDraws } from '../../geometry/pinch-by-draws'
import { rowPlot } from '../../geometry/row-plot'
import { sectionVolume } from '../../geometry/section-volume'
import { throatNetArea } from '../../geometry/throat-net-area'
import { throatShare } from '../../geometry/throat-share'
import { chanceOfConforming } from '../../uncertainty/chance-of-conforming'
import { combineInQuadrature } from '../../uncertainty/combine-in-quadrature'
import { meanOfReadings } from '../../uncertainty/mean-of-readings'
import { theilSenLine } from '../../uncertainty/theil-sen-line'
import { convert } from '../../units/convert'
import type { Checked, Computable, ComputeInput, Computed } from './computable'
import { seededNormal } from './seeded-normal'

const number = (name: string, unit: string, least: number, most: number, optional = false): ComputeInput => ({ name, kind: 'number', unit, least, most, ...(optional ? { optional } : {}) })
const list = (name: string, unit: string, least: number, most: number, fewest: number, longest = 200): ComputeInput => ({ name, kind: 'numbers', unit, least, most, fewest, longest })
const figure = (value: number): string => String(Number(value.toPrecision(7)))
const one = (value: number, unit: string, what: string, sum: string, u?: number): Computed =>
  ({ value, unit, ...(u === undefined ? {} : { standardUncertainty: u }), trace: [{ what, sum, gives: `${figure(value)} ${unit}`.trim() }] })

const stationsAndAreas: readonly ComputeInput[] = [list('stationsMm', 'mm', 0, 1000, 2, 60), list('areasMm2', 'mm2', 1, 100_000, 2, 60)]

function sections(given: Checked): Section[] {
  const [stations, areas] = [given.numbers('stationsMm'), given.numbers('areasMm2')]
  if (stations.length !== areas.length) throw new RangeError('stationsMm and areasMm2 must be of one length')
  return stations.map((stationMm, index) => ({ stationMm, areaMm2: areas[index] as number }))
}

/** Quantities of metal, and of doubt itself, that can be checked by hand. */
export const metalQuantities: readonly Computable[] = [
  {
    name: 'convert', title: 'A value in another unit', unit: 'as asked', source: 'NIST SP 811, appendix B.8',
    inputs: [number('value', '', -1e12, 1e12), { name: 'from', kind: 'text', longest: 12 }, { name: 'to', kind: 'text', longest: 12 }, number('densityKgPerM3', 'kg/m3', 0.01, 20_000, true)],
    compute: (given) => {
      const density = given.numberOrNull('densityKgPerM3')
      return one(convert(given.number('value'), given.text('from'), given.text('to'), density === null ? {} : { densityKgPerM3: density }), given.text('to'), 'exact ratio of the two units', `${given.number('value')} ${given.text('from')}`)
    },
  },
  {
    name: 'mean-of-readings', title: 'Mean of repeats at one spot', unit: 'as given', source: 'JCGM 100:2008, 4.2 and 4.3.7 (from memory)',
    inputs: [list('values', '', -1e6, 1e6, 2), number('resolution', '', 1e-9, 1e3)],
    compute: (given) => {
      const mean = meanOfReadings(given.numbers('values'), given.number('resolution'))
      return { value: mean.value, unit: '', standardUncertainty: mean.standardUncertainty, trace: [
        { what: 'mean', sum: `sum of ${mean.count} readings / ${mean.count}`, gives: figure(mean.value) },
        { what: 'scatter of the mean', sum: `${figure(mean.standardDeviation)} / sqrt(${mean.count})`, gives: figure(mean.standardDeviation / Math.sqrt(mean.count)) },
        { what: 'resolution', sum: `${given.number('resolution')} / 2 / sqrt(3)`, gives: figure(given.number('resolution') / 2 / Math.sqrt(3)) },
        { what: 'combined', sum: 'root of the sum of squares', gives: figure(mean.standardUncertainty) },
      ] }
    },
  },
  {
    name: 'combine-in-quadrature', title: 'Combined standard uncertainty', unit: 'as given', source: 'JCGM 100:2008, 5.1.2 (from memory)',
    inputs: [list('contributions', '', 0, 1e9, 1)],
    compute: given => one(combineInQuadrature(given.numbers('contributions')), '', 'root of the sum of squares', given.numbers('contributions').join(', ')),
  },
  {
    name: 'conform-probability', title: 'Chance that the true value lies inside the limits', unit: '', source: 'JCGM 106:2012, 7 (from memory); handbook 3.1',
    inputs: [number('value', '', -1e9, 1e9), number('standardUncertainty', '', 1e-9, 1e9), number('lower', '', -1e9, 1e9, true), number('upper', '', -1e9, 1e9, true), number('degreesOfFreedom', '', 1, 1e6, true)],
    compute: (given) => {
      const limits = { lower: given.numberOrNull('lower'), upper: given.numberOrNull('upper') }
      return one(chanceOfConforming(given.number('value'), given.number('standardUncertainty'), given.numberOrNull('degreesOfFreedom'), limits), '', 'F((y - a) / u) - F((y - b) / u)', `y = ${given.number('value')}, u = ${given.number('standardUncertainty')}, a = ${limits.lower ?? 'none'}, b = ${limits.upper ?? 'none'}`)
    },
  },
  {
    name: 'throat-share', title: 'Throat as per cent of the valve head', unit: '%', source: 'handbook 3.5',
    inputs: [list('throatMm', 'mm', 5, 120, 1, 12), number('throatExpandedU', 'mm', 0, 5), number('valveMm', 'mm', 5, 120), number('valveExpandedU', 'mm', 0, 5)],
    compute: (given) => {
      const u = given.number('throatExpandedU') / 2
      const share = throatShare(given.numbers('throatMm').map(mm => ({ mm, standardUncertainty: u })), { mm: given.number('valveMm'), standardUncertainty: given.number('valveExpandedU') / 2 })
      return { value: share.value, unit: '%', standardUncertainty: share.standardUncertainty ?? 0, trace: share.trace }
    },
  },
  {
    name: 'throat-net-area', title: 'Throat less the stem', unit: 'mm2', source: 'handbook 3.5',
    inputs: [number('throatMm', 'mm', 5, 120), number('stemMm', 'mm', 1, 30)],
    compute: given => one(throatNetArea(given.number('throatMm'), given.number('stemMm')), 'mm2', 'pi / 4 (d^2 - stem^2)', `pi / 4 x (${given.number('throatMm')}^2 - ${given.number('stemMm')}^2)`),
  },
  {
    name: 'land-inner-diameter', title: 'Inner edge of the seat from its land', unit: 'mm', source: 'handbook 3.5',
    inputs: [number('seatOuterMm', 'mm', 5, 120), number('landMm', 'mm', 0.05, 20), number('seatDeg', 'degrees', 1, 89)],
    compute: given => one(landInnerDiameter(given.number('seatOuterMm'), given.number('landMm'), given.number('seatDeg')), 'mm', 'seat less twice the land across', `${given.number('seatOuterMm')} - 2 x ${given.number('landMm')} x cos(${given.number('seatDeg')})`),
  },
  {
    name: 'area-change', title: 'Area change per 10 mm between neighbouring sections', unit: '% per 10 mm', source: 'handbook 3.5', inputs: stationsAndAreas,
    compute: (given) => {
      const changes = areaChanges(sections(given))
      return { value: changes.map(change => change.percentPer10Mm), unit: '% per 10 mm', trace: changes.map(change => ({ what: `${change.fromMm} to ${change.toMm} mm`, sum: '100 (A2 / A1 - 1) / (ds / 10)', gives: `${change.percentPer10Mm.toFixed(2)} % per 10 mm` })) }
    },
  },
  {
    name: 'taper', title: 'Included angle of the cone between neighbouring sections', unit: 'degrees', source: 'handbook 8.3', inputs: stationsAndAreas,
    compute: (given) => {
      const changes = areaChanges(sections(given))
      return { value: changes.map(change => change.coneDeg), unit: 'degrees', trace: changes.map(change => ({ what: `${change.fromMm} to ${change.toMm} mm`, sum: '2 atan((d2 - d1) / 2 ds), d = sqrt(4 A / pi)', gives: `${change.coneDeg.toFixed(2)} degrees` })) }
    },
  },
  {
    name: 'pinch', title: 'Area of the pinch', unit: 'mm2', source: 'handbook 8.1', inputs: stationsAndAreas,
    compute: (given) => {
      const found = pinch(sections(given))
      return { value: found.areaMm2, unit: 'mm2', standardUncertainty: found.areaUncertainty, trace: found.trace }
    },
  },
  {
    name: 'pinch-station', title: 'Where the pinch is', unit: 'mm', source: 'handbook 8.1', inputs: stationsAndAreas,
    compute: (given) => {
      const found = pinch(sections(given))
      return { value: found.stationMm, unit: 'mm', standardUncertainty: found.stationUncertainty, trace: found.trace }
    },
  },
  {
    name: 'pinch-by-draws', title: 'Area of the pinch, its doubt by drawing', unit: 'mm2', source: 'handbook 8.1',
    inputs: [...stationsAndAreas, { name: 'draws', kind: 'integer', unit: '', least: 10, most: 10_000 }, { name: 'seed', kind: 'integer', unit: '', least: 0, most: 4_294_967_295 }],
    compute: (given) => {
      const all = sections(given)
      const found = pinch(all)
      const doubt = pinchByDraws(all, seededNormal(given.number('seed')), given.number('draws'))
      return { value: found.areaMm2, unit: 'mm2', standardUncertainty: doubt.areaUncertainty, trace: [...found.trace, { what: 'spread of the draws, each section 1 %', sum: `${given.number('draws')} draws`, gives: `${doubt.areaUncertainty.toFixed(2)} mm2, ${doubt.stationUncertainty.toFixed(2)} mm` }] }
    },
  },
  {
    name: 'section-volume', title: 'Volume of a port from its sections', unit: 'cc', source: 'handbook 8.17', inputs: stationsAndAreas,
    compute: given => one(sectionVolume(sections(given)), 'cc', 'trapezium rule', `${given.numbers('stationsMm').length} sections`),
  },
  {
    name: 'metal-left', title: 'Metal that may still be taken, rounded down to 0.1 mm (-1: stop; show the map)', unit: 'mm', source: 'handbook 3.1 and 8.9',
    inputs: [number('readingMm', 'mm', 0, 50), number('expandedUncertainty', 'mm', 0.001, 5), number('acceptLeastMm', 'mm', 0, 50), number('hardLeastMm', 'mm', 0, 50), number('handAllowanceMm', 'mm', 0, 5)],
    compute: (given) => {
      const reading = { readingMm: given.number('readingMm'), expandedUncertainty: given.number('expandedUncertainty'), acceptLeastMm: given.number('acceptLeastMm'), hardLeastMm: given.number('hardLeastMm'), handAllowanceMm: given.number('handAllowanceMm') }
      const left = metalLeft(reading)
      return { value: left.takeMm ?? -1, unit: 'mm', trace: [
        { what: 'reading less U, accept least and hand', sum: `${reading.readingMm} - ${reading.expandedUncertainty} - ${reading.acceptLeastMm} - ${reading.handAllowanceMm}`, gives: `${left.takeMm === null ? 'stop; show the map' : `${left.takeMm.toFixed(1)} mm`}, stop at ${left.stopAtMm} mm` },
        { what: 'chance of ending under the hard least', sum: `(${reading.hardLeastMm} - ${reading.readingMm} + cut) / sqrt(u^2 + hand^2)`, gives: left.chanceUnderHardLeast.toExponential(2) },
      ] }
    },
  },
  {
    name: 'chance-under', title: 'Chance that a wall ends under its hard least after a cut', unit: '', source: 'handbook 8.9',
    inputs: [number('wallMm', 'mm', 0, 50), number('standardUncertainty', 'mm', 0.0001, 5), number('cutMm', 'mm', 0, 20), number('handMm', 'mm', 0, 5), number('hardLeastMm', 'mm', 0, 50)],
    compute: given => one(chanceUnder({ wallMm: given.number('wallMm'), standardUncertainty: given.number('standardUncertainty'), cutMm: given.number('cutMm'), handMm: given.number('handMm'), hardLeastMm: given.number('hardLeastMm') }), '', 'normal, (least - wall + cut) / sqrt(u^2 + hand^2)', `(${given.number('hardLeastMm')} - ${given.number('wallMm')} + ${given.number('cutMm')}) / sqrt(${given.number('standardUncertainty')}^2 + ${given.number('handMm')}^2)`),
  },
  {
    name: 'row-plot', title: 'Slope of the least wall along the cylinders', unit: 'mm a cylinder', source: 'handbook 8.9',
    inputs: [list('leastMm', 'mm', 0, 50, 3, 16), number('expandedUncertainty', 'mm', 0.001, 5)],
    compute: (given) => {
      const walls = given.numbers('leastMm')
      const row = rowPlot(walls.map((leastMm, index) => ({ cylinder: index + 1, leastMm })), given.number('expandedUncertainty'))
      return { value: row.slopeMm, unit: 'mm a cylinder', standardUncertainty: row.expandedUncertainty / 2, trace: [{ what: 'least squares line, cylinders in order', sum: walls.join(', '), gives: `${row.slopeMm.toFixed(3)} ± ${row.expandedUncertainty.toFixed(3)} mm a cylinder: ${row.coresMoved ? 'the cores moved' : 'no slope beyond its doubt'}` }] }
    },
  },
  {
    name: 'compression-ratio', title: 'Compression ratio', unit: '', source: 'handbook 8.12',
    inputs: [number('sweptCc', 'cc', 1, 10_000), number('chamberCc', 'cc', 0.1, 5000), number('gasketCc', 'cc', 0, 500), number('deckCc', 'cc', -100, 500), number('dishCc', 'cc', -500, 500)],
    compute: given => one(compressionRatio({ sweptCc: given.number('sweptCc'), chamberCc: given.number('chamberCc'), gasketCc: given.number('gasketCc'), deckCc: given.number('deckCc'), dishCc: given.number('dishCc') }), '', '1 + swept / clearance', `1 + ${given.number('sweptCc')} / (${['chamberCc', 'gasketCc', 'deckCc', 'dishCc'].map(name => given.number(name)).join(' + ')})`),
  },
  {
    name: 'disc-volume', title: 'Volume of a gasket or of the gap at the deck', unit: 'cc', source: 'geometry',
    inputs: [number('boreMm', 'mm', 1, 2000), number('thicknessMm', 'mm', 0, 100)],
    compute: given => one(discVolume(given.number('boreMm'), given.number('thicknessMm')), 'cc', 'pi / 4 x bore^2 x thickness / 1000', `pi / 4 x ${given.number('boreMm')}^2 x ${given.number('thicknessMm')} / 1000`),
  },
  {
    name: 'bend-speed-ratio', title: 'Speed at the inside of a bend over the mean', unit: '', source: 'handbook 8.14',
    inputs: [number('heightMm', 'mm', 0.1, 500), number('innerRadiusMm', 'mm', 0.1, 500)],
    compute: given => one(bendSpeedRatio(given.number('heightMm'), given.number('innerRadiusMm')), '', 'h / (ri ln((ri + h) / ri))', `h = ${given.number('heightMm')}, ri = ${given.number('innerRadiusMm')}`),
  },
  {
    name: 'robust-line', title: 'Slope that one bad point in four cannot move far', unit: 'y a unit of x', source: 'Sen 1968 (from memory)',
    inputs: [list('x', '', -1e9, 1e9, 3), list('y', '', -1e9, 1e9, 3)],
    compute: (given) => {
      const [x, y] = [given.numbers('x'), given.numbers('y')]
      if (x.length !== y.length) throw new RangeError('x and y must be of one length')
      const line = theilSenLine(x, y)
      return one(line.slope, '', 'median of the slopes between all pairs', `intercept ${figure(line.intercept)}, scatter ${figure(line.scatter)}`)
    },
  },
]
