import { z } from 'zod'
import { columnQuantities, isSheetUnit } from '#server/services/flow-sheets/sheet-words'
import type { BenchProfile, SheetUnit } from '#shared/domain/airflow/sheet/sheet-reading'
import { unitTable, type UnitName } from '#shared/domain/units/unit-table'
import written from '../../../content/school/bench-profiles.json'

const quantityUnit = z.object({ value: z.number().positive(), unit: z.custom<UnitName>(word => typeof word === 'string' && Object.hasOwn(unitTable, word)) })
const profile = z.object({
  bench: z.string(),
  decimal: z.enum(['.', ',']),
  columns: z.record(z.object({ quantity: z.enum(columnQuantities), unit: z.custom<SheetUnit>(word => typeof word === 'string' && isSheetUnit(word)).nullable() })),
  pressure: quantityUnit.nullable(),
  fullScaleCfm: z.record(z.number().positive()).nullable(),
  plateNominal: quantityUnit.nullable(),
  densityCorrected: z.boolean(),
  traits: z.string(),
})

/** How each flow bench of the school writes its sheets. */
export const benchProfiles: readonly BenchProfile[] = z.array(profile).parse(written.profiles)
