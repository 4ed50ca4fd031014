import type { Evaluated, TraceStep } from '../../uncertainty/evaluated'
import type { JudgedUnit, NotAssessed } from '../evidence'
import { unitInWords } from '../words'

/** A value of one port with its working; whatever is left out is not known of it. */
export function flowValue(figures: { value: number, unit: string, liftMm?: number, at?: string, u?: number, trace: TraceStep[] }): Evaluated {
  return { value: figures.value, unit: figures.unit, standardUncertainty: figures.u ?? null, degreesOfFreedom: null, at: figures.at ?? null, liftMm: figures.liftMm ?? null, trace: figures.trace }
}

/** Nobody ran it yet. */
export const noSheet = (unit: JudgedUnit): NotAssessed => ({ notAssessed: `There is no flow sheet of this stage for ${unitInWords(unit)} yet.` })
