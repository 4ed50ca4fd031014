import { strokeWords } from '#server/services/school/stage-words'
import type { BenchView } from '#shared/contract/views'
import { pointName, type RouteStage } from '#shared/domain/rubric/route-state'

/** The next allowed stroke in plain words, or why there is none. */
export function nextStroke(stage: RouteStage, lesson: { number: number, slug: string, title: string } | null): BenchView['next'] {
  const { due } = stage
  if (!due) return null
  const open = stage.state === 'open'
  const stroke = open ? strokeWords(stage.op, due.part) : stage.state === 'held' && due.point ? `${pointName(due.point)}: wait for it. Nothing is cut meanwhile.` : 'Nothing is cut now.'
  return {
    op: stage.op,
    stageName: stage.name,
    stroke,
    lesson,
    submission: due.submission ? { id: due.submission.id, part: due.submission.part, state: due.submission.state } : null,
    offersStroke: open,
    why: due.try > 1 && open ? 'Sent back: add only what was asked for.' : stage.why,
  }
}
