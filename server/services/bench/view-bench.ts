import type { EntityManager } from '@mikro-orm/postgresql'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Review } from '#server/db/entities/Review'
import type { FoundHead } from '#server/services/heads/find-head'
import { stageNow } from '#server/services/heads/head-summary'
import { headSummaries } from '#server/services/heads/list-heads'
import { loadRoute } from '#server/services/heads/route-state'
import { toHeadView } from '#server/services/heads/view-head'
import { consentState } from '#server/services/safety/consent-states'
import { cautionLines, shortCaution } from '#server/services/school/stage-words'
import { gatherForPart } from '#server/services/submissions/gather-evidence'
import { wantedViews } from '#server/services/submissions/wanted-views'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { BenchView } from '#shared/contract/views'
import { portsOfPart } from '#shared/domain/rubric/covers'
import { metalToTake } from '#shared/domain/rubric/metal-to-take'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { spotInWords, unitInWords } from '#shared/domain/rubric/words'
import { nextStroke } from './next-stroke'
import { waitingLines } from './waiting-lines'
import { weekOf } from './week-of'

/** My bench: what a student needs before the next stroke. The head worked on is the one handed out last that is not finished, scrapped or sawn. */
export async function viewBench(em: EntityManager, app: App, actor: Actor): Promise<BenchView> {
  const now = app.clock.schoolNow()
  const heads = await em.find(PracticeHead, { student: actor.id }, { populate: ['student', 'cohort', 'casting', 'rubric'], orderBy: { receivedAt: 'desc', number: 'desc' } }) as FoundHead[]
  const head = heads.find(one => one.state === 'received' || one.state === 'working')
  const otherHeads = await headSummaries(em, app, heads.filter(one => one !== head))
  const nothing: BenchView = { consent: await consentState(em, actor.id), head: null, otherHeads, today: { date: now.toISOString(), week: null, weeks: null }, caution: [shortCaution], next: null, metalLeft: [], noMoreCutting: [], waiting: [], wanted: [], fromInstructor: null }
  if (!head) return nothing

  const route = await loadRoute(em, app, head)
  const view = await toHeadView(em, head, route)
  const stage = route.stages.find(one => one.state === 'open') ?? stageNow(route.stages)
  const bench: BenchView = {
    ...nothing,
    head: view,
    today: { date: now.toISOString(), ...weekOf(head.cohort?.$ ?? null, now) },
    noMoreCutting: route.conditions,
    waiting: waitingLines(route.stages),
    fromInstructor: await newestWords(em, head.id),
  }
  if (!stage || !stage.due) return bench

  const { rubric } = head.rubric.$
  const due = stageAsDue(rubric, stage.op)
  const begun = stage.due.submission
  const ports = portsOfPart(due, stage.due.part, head.casting.$.card, head.firstCylinder)
  const { evidence } = await gatherForPart(em, head, { op: stage.op, part: stage.due.part, ports }, begun?.id ?? null)
  return {
    ...bench,
    caution: cautionLines(stage.op),
    next: nextStroke(stage, view.stages.find(one => one.op === stage.op)?.lessons[0] ?? null),
    metalLeft: stage.state === 'shut'
      ? []
      : metalToTake(due, evidence).map(one => ({
          what: one.title,
          where: [one.at === null ? null : spotInWords(one.at), unitInWords(one)].filter(Boolean).join(', '),
          takeMm: one.takeMm, stopAtMm: one.stopAtMm, expandedUncertainty: one.expandedUncertainty, valueMm: one.valueMm,
          chanceUnderHardLeast: one.chanceUnderHardLeast, handAllowanceMm: evidence.handAllowanceMm, band: one.band,
        })),
    wanted: stage.state === 'open' ? wantedViews(rubric, evidence) : [],
  }
}

async function newestWords(em: EntityManager, headId: string): Promise<BenchView['fromInstructor']> {
  const [review] = await em.find(Review, { submission: { head: headId }, feedback: { $ne: '' } }, { populate: ['by'], orderBy: { at: 'desc' }, limit: 1 })
  return review ? { by: review.by.$.name, at: review.at.toISOString(), text: review.feedback, submissionId: review.submission.id } : null
}
