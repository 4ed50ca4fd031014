import type { EntityManager } from '@mikro-orm/postgresql'
import { newestReadings } from '#server/services/submissions/gather-evidence'
import type { SheetHeader } from '#shared/domain/airflow/flow-run'
import type { SheetReading } from '#shared/domain/airflow/sheet/sheet-reading'

/** Header of the head's baseline the reading will be held against: the newest of its side, of its cylinder where there is one; null without. */
export async function baselineHeader(tx: EntityManager, headId: string, sheetId: string, { kind, header, runs }: Pick<SheetReading, 'kind' | 'header' | 'runs'>): Promise<SheetHeader | null> {
  const [run] = runs
  if (kind !== 'flow' || header.stage === 'base' || !run || run.side === null) return null
  const baselines = (await newestReadings(tx, headId)).filter(one => one.header.stage === 'base' && one.sheet.id !== sheetId).reverse()
  const ofSide = baselines.filter(one => one.runs.some(other => other.side === run.side))
  return (ofSide.find(one => one.runs.some(other => other.side === run.side && other.cylinder === run.cylinder)) ?? ofSide[0])?.header ?? null
}
