import { z } from 'zod'
import { benchProfiles } from '#server/services/school/bench-profiles'
import type { BenchProfile } from '#shared/domain/airflow/sheet/sheet-reading'
import { columnQuantity, sheetUnit } from './column-choices'

const unit = z.string().transform((text, context) => {
  const known = sheetUnit(text)
  if (known === null) context.addIssue({ code: 'custom', message: `${text} is no unit` })
  return known ?? z.NEVER
})
const amount = z.object({ value: z.number().positive(), unit: z.string().transform((text, context) => {
  const known = sheetUnit(text)
  if (known === null || known === 'percent' || known === 'thousandths' || known === 'lift/diameter') {
    context.addIssue({ code: 'custom', message: `${text} is no unit of a flow or pressure` })
    return z.NEVER
  }
  return known
}) })

const profiles = z.array(z.object({
  bench: z.string(),
  decimal: z.enum(['.', ',']),
  columns: z.record(z.object({ quantity: columnQuantity, unit: unit.nullable() })),
  pressure: amount.nullable(),
  fullScaleCfm: z.record(z.number().positive()).nullable(),
  plateNominal: amount.nullable(),
  densityCorrected: z.boolean(),
  traits: z.string(),
}))

/** The profiles of the school's benches as the sheet reader takes them. @throws {ZodError} when the school's file has a mistake */
export function readerProfiles(): readonly BenchProfile[] {
  return profiles.parse(benchProfiles)
}
