import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import type { PracticeHead } from '#server/db/entities/PracticeHead'
import { newestReadings } from '#server/services/submissions/gather-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { CurveSetView } from '#shared/contract/views'
import { changePerLift } from '#shared/domain/airflow/change-per-lift'
import type { EvidenceSet } from '#shared/domain/rubric/evidence'
import { baselineOp, runOf } from '#shared/domain/rubric/flow-evidence'
import type { Side } from '#shared/domain/units/port'
import { findHead } from './find-head'

/** The curves of a head somebody may see. @throws {Refusal} head_not_found */
export async function listCurves(em: EntityManager, app: App, actor: Actor, headId: string): Promise<CurveSetView[]> {
  return curveSets(em, await findHead(em, app, actor, headId))
}

/** A head's flow runs a port at a time: the run that counts at each stage, baseline first, and the change of the last against the baseline. */
export async function curveSets(em: EntityManager, head: Loaded<PracticeHead, 'casting' | 'rubric'>): Promise<CurveSetView[]> {
  const evidence = await flowEvidence(em, head)
  const ops = [...new Set(evidence.sheets.map(sheet => sheet.op))].sort((a, b) => a - b)
  const ports = new Map<string, { cylinder: number | null, side: Side }>()
  for (const run of evidence.sheets.flatMap(sheet => sheet.runs)) if (run.side !== null && run.points.length > 0) ports.set(`${run.cylinder ?? ''}|${run.side}`, { cylinder: run.cylinder, side: run.side })

  return [...ports.values()].sort((a, b) => (a.cylinder ?? 0) - (b.cylinder ?? 0) || (a.side === 'intake' ? -1 : 1)).map((port) => {
    const counted = ops.flatMap((op) => {
      const found = runOf(evidence, op, port)
      return found && found.run.cylinder === port.cylinder ? [{ op, ...found }] : []
    })
    const baseline = counted.find(one => one.op === baselineOp)
    const last = counted[counted.length - 1]
    return {
      ...port,
      runs: counted.map(({ op, run, sheet }) => ({
        label: head.rubric.$.rubric.stages.find(stage => stage.op === op)?.name ?? `op ${op}`,
        stage: sheet.header.stage ?? '',
        op,
        date: sheet.header.date,
        points: run.points.map(({ liftMm, cfm28, expandedUncertainty }) => ({ liftMm, cfm28, expandedUncertainty })),
        missing: run.missing,
      })),
      changes: baseline && last && last.op > baselineOp
        ? changePerLift(last.run, baseline.run).map(({ liftMm, changeCfm, expandedUncertainty, changePercent, verdict }) => ({ liftMm, cfm: changeCfm, expandedUncertainty, percent: changePercent, verdict }))
        : null,
    }
  })
}

/** A head's flow sheets as evidence, each by its newest reading, and nothing else. */
export async function flowEvidence(em: EntityManager, head: Loaded<PracticeHead, 'casting'>): Promise<EvidenceSet> {
  const sheets = (await newestReadings(em, head.id)).filter(one => one.kind === 'flow')
  return {
    casting: head.casting.$.card, op: 0, part: 'rest', ports: [], readings: [], photos: [], documents: [], judged: [], acidCleaned: null, handAllowanceMm: 0,
    sheets: sheets.map(one => ({ id: one.sheet.id, op: one.sheet.$.submission.$.op, header: one.header, runs: one.runs, takenAt: one.sheet.$.addedAt.getTime() })),
  }
}
