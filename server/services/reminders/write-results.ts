import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { flowEvidence } from '#server/services/heads/curve-sets'
import type { FoundHead } from '#server/services/heads/find-head'
import { firstName } from '#server/services/mail/first-name'
import { results as resultsLetter } from '#server/services/mail/templates/results'
import { writeMail } from '#server/services/mail/write-mail'
import { pointResults } from '#server/services/review/point-results'
import { standingState } from '#server/services/review/standing-state'
import type { App } from '#server/utils/app'
import { roundToDoubt } from '#shared/domain/units/round-to-doubt'
import type { Criterion } from '#shared/domain/rubric/criterion'
import { weightedFlowGain } from '#shared/domain/rubric/evaluators/weighted-flow-gain'
import { baselineOp, cylinderRun } from '#shared/domain/rubric/flow-evidence'
import { headResult, type HeadRow } from '#shared/domain/rubric/head-result'

/**
 * Message 16 to somebody who finished: word and score of their head, its lift-weighted gain where there are curves, what was done
 * well and one thing to work on. Once a place.
 *
 * @returns whether there was a head to tell of
 */
export async function writeResults(tx: EntityManager, app: App, place: BenchPlace): Promise<boolean> {
  if (!place.person) return false
  const person = await tx.findOneOrFail(User, place.person.id)
  // The core handed out last that was not lost on the way.
  const [head] = await tx.find(PracticeHead, { student: person.id, cohort: place.cohort.id, state: { $nin: ['scrapped', 'sawn'] } }, { populate: ['student', 'cohort', 'casting', 'rubric'], orderBy: { receivedAt: 'desc', number: 'desc' }, limit: 1 }) as FoundHead[]
  if (!head) return false
  // What only staff do to it later (sectioning) is no part of the student's result.
  const criteria = head.rubric.$.rubric.stages.filter(stage => (stage.staffClearances ?? []).length === 0).flatMap(stage => stage.criteria)
  const result = headResult(await rowsOf(tx, head.id, criteria), criteria)
  await writeMail(tx, app, {
    key: `results:${place.id}`,
    template: 'results',
    to: person,
    letter: resultsLetter({
      first: firstName(person.name), head: head.number, word: result.word, score: result.score === null ? null : Math.round(result.score),
      gain: await intakeGain(tx, head), best: result.best.map(one => one.title), workOn: result.workOn ? { title: result.workOn.criterion.title, text: result.workOn.text } : null,
      url: `${app.config.publicUrl}/my-record`,
    }),
  })
  return true
}

async function rowsOf(em: EntityManager, headId: string, criteria: readonly Criterion[]): Promise<HeadRow[]> {
  const rows = await pointResults(em, headId, criteria)
  return rows.map(row => ({ criterion: row.result.criterion, state: standingState(row), pConform: row.result.pConform ?? null, text: row.result.text }))
}

/** "16.8 ± 0.9 %", of the last stage flowed against the baseline; null where a sheet is missing or stops short. */
async function intakeGain(em: EntityManager, head: Loaded<PracticeHead, 'casting' | 'rubric'>): Promise<string | null> {
  const evidence = await flowEvidence(em, head)
  const ops = evidence.sheets.filter(sheet => sheet.op > baselineOp && sheet.runs.some(run => run.side === 'intake' && run.points.length > 0)).map(sheet => sheet.op)
  if (ops.length === 0) return null
  const last = { ...evidence, op: Math.max(...ops) }
  const [criterion] = head.rubric.$.rubric.stages.flatMap(stage => stage.criteria).filter(one => one.quantity === 'weighted-flow-gain')
  if (!criterion) return null
  const gained = weightedFlowGain(last, criterion, { cylinder: cylinderRun(last, 'intake'), side: 'intake' })
  if ('notAssessed' in gained) return null
  const [gain] = gained.values
  if (!gain?.standardUncertainty) return null
  const { value, doubt } = roundToDoubt(gain.value, 2 * gain.standardUncertainty)
  return `${value} ± ${doubt} %`
}
