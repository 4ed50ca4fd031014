/** A quantity a person may type a reading of. */
export interface ReadingQuantity {
  /** In plain words. */
  title: string
  kind: 'measured' | 'count' | 'yes/no'
  /** Unit readings are kept in beside what was typed. */
  baseUnit: string
  /** Units it may be typed in; the base unit is among them. */
  units: readonly string[]
  /** What one reading is of, where the wants of its stage do not say. */
  per: 'head' | 'cylinder' | 'port'
  /** Least and most a reading can be, base unit, whatever the casting: a slip of unit falls outside, a bad cut does not. */
  least: number
  most: number
}

const lengths = ['mm', 'in', 'thou']
const areas = ['mm2', 'cm2', 'in2']
const volumes = ['cc', 'ml', 'in3']

type Per = ReadingQuantity['per']
const length = (title: string, least: number, most: number, per: Per = 'port'): ReadingQuantity => ({ title, kind: 'measured', baseUnit: 'mm', units: lengths, per, least, most })
const area = (title: string, least: number, most: number, per: Per = 'port'): ReadingQuantity => ({ title, kind: 'measured', baseUnit: 'mm2', units: areas, per, least, most })
const volume = (title: string, least: number, most: number, per: Per): ReadingQuantity => ({ title, kind: 'measured', baseUnit: 'cc', units: volumes, per, least, most })
const other = (title: string, units: [string, ...string[]], least: number, most: number, per: Per): ReadingQuantity => ({ title, kind: 'measured', baseUnit: units[0], units, per, least, most })
const count = (title: string, most: number, per: Per): ReadingQuantity => ({ title, kind: 'count', baseUnit: 'count', units: ['count'], per, least: 0, most })
const yesNo = (title: string, per: Per): ReadingQuantity => ({ title, kind: 'yes/no', baseUnit: 'yes/no', units: ['yes/no'], per, least: 0, most: 1 })

/**
 * Every quantity a reading may be of: those the rubric's wants name, and those it measures from a photo, which are typed until the
 * program measures them itself. The pad and the server use the same table.
 *
 * Source of the bounds: school design values, wide of anything iron allows.
 */
export const readingQuantities: Readonly<Record<string, ReadingQuantity>> = {
  'deck-flatness': length('deck flatness', 0, 3, 'head'),
  'guide-rock': length('guide rock', 0, 4),
  'seat-land': length('seat land', 0, 8),
  'valve-head-diameter': length('valve head diameter', 10, 80),
  'valve-stem-diameter': length('valve stem diameter', 3, 16),
  'valve-margin': length('valve margin', 0, 6),
  'valve-runout': length('valve run-out', 0, 3),
  'rinse-ph': other('pH of the last rinse', ['pH'], 0, 14, 'head'),
  'crack-indications': count('crack indications', 50, 'cylinder'),
  'rig-pressure': other('pressure on the rig', ['kPa', 'bar', 'psi', 'mbar'], 0, 1000, 'head'),
  'throat-diameter': length('throat diameter', 8, 80),
  'gauge-zero': length('reading on the zero block', -20, 60, 'head'),
  'wall-thickness': length('wall thickness', 0.2, 40),
  'section-area': area('section area', 40, 6000),
  'chamber-volume': volume('chamber volume', 4, 250, 'cylinder'),
  'port-volume': volume('port volume', 15, 1500, 'head'),
  'fluid-temperature': other('temperature of the fluid', ['degC', 'degF'], 0, 60, 'head'),
  'plate-flow': other('flow through the plate', ['cfm', 'l/s', 'l/min', 'm3/h'], 5, 1000, 'head'),
  'dummy-height': length('height of the dummy, proud of the seat', -8, 8),
  'floor-hump': length('hump of the chamber floor', -8, 12, 'cylinder'),
  'mean-radial-cut': length('mean radial cut', 0, 10, 'cylinder'),
  'guide-boss-width': length('width of the guide boss', 3, 50),
  'guide-length': length('guide length', 8, 150),
  'guide-offset': length('offset from the guide centre', 0, 80),
  'apex-height': length('height of the short-turn apex', 0, 100),
  'port-width': length('port width', 8, 100),
  'line-width': length('width of the scribed line', 0, 12, 'cylinder'),
  'bore-line-offset': length('offset of the bore line', -25, 25, 'cylinder'),
  'shroud-arc-error': length('error of the shroud arc', -25, 25, 'cylinder'),
  'no-grind-hatching': yesNo('no-grind areas hatched', 'cylinder'),
  'land-showing': length('land showing beside the dummy', 0, 8),
  'bore-line-margin': length('margin to the bore line', -15, 25, 'cylinder'),
  'shroud-gap': length('gap at the shroud', -10, 40, 'cylinder'),
  'plug-edge-radius': length('radius at the plug edge', 0, 20, 'cylinder'),
  'no-grind-area-cut': area('cut inside a no-grind area', 0, 3000, 'cylinder'),
  'land-nicks': count('nicks in the land', 200, 'port'),
  'under-seat-radius': length('radius under the seat', 0, 50),
  'floor-drop': length('drop of the port floor', -25, 25, 'head'),
  'entry-step': length('step at the entry', -10, 15, 'head'),
  'exit-step': length('step at the exit', -10, 15, 'head'),
  'roof-hump': length('hump left in the roof', -15, 25, 'head'),
  'short-turn-radius': length('short-turn radius', 0, 100),
  'grit': yesNo('no grit left', 'port'),
  'cut-offset': length('offset of the saw cut', -25, 25, 'head'),
  'agreeing-readings': other('readings that agree', ['%'], 0, 100, 'head'),
}

/** The quantity of that name; undefined when readings cannot be of it. */
export function findReadingQuantity(name: string): ReadingQuantity | undefined {
  return Object.hasOwn(readingQuantities, name) ? readingQuantities[name] : undefined
}
