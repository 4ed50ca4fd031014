import type { SheetFinding } from '#server/db/entities/FlowSheet'
import type { SheetReading } from '#shared/domain/airflow/sheet/sheet-reading'

const opOfStage = { base: 30, bowl: 100, port: 130, short: 150, final: 190 } as const
const stageInWords = { base: 'the baseline', bowl: 'the bowl', port: 'the port', short: 'the short turn', final: 'the finished head' } as const

/**
 * What a sheet says of itself that does not go with the head and stage it was put in for. A port the head does not have cannot be right;
 * another head's number or another stage may be a slip of the pen, and is only said.
 */
export function sheetOfHead(reading: Pick<SheetReading, 'header' | 'runs'>, of: { number: string, cylinders: number, op: number }): SheetFinding[] {
  const { head, stage } = reading.header
  const strange = [...new Set(reading.runs.flatMap(run => (run.cylinder !== null && (run.cylinder < 1 || run.cylinder > of.cylinders) ? [run.cylinder] : [])))]
  return [
    ...strange.map((cylinder): SheetFinding => ({ code: 'port-not-on-head', severity: 'refuse', lifts: [], text: `The sheet is of cylinder ${cylinder}; this head has ${of.cylinders}.` })),
    ...(head !== null && folded(head) !== folded(of.number) ? [{ code: 'other-head', severity: 'note', lifts: [], text: `The sheet says it is of ${head}; this submission is of ${of.number}.` } satisfies SheetFinding] : []),
    ...(stage !== null && opOfStage[stage] !== of.op ? [{ code: 'other-stage', severity: 'note', lifts: [], text: `The sheet says it is of ${stageInWords[stage]}, which is op ${opOfStage[stage]}; this submission is of op ${of.op}.` } satisfies SheetFinding] : []),
  ]
}

const folded = (text: string) => text.toLowerCase().replaceAll(/[^a-z\d]/g, '')
