import type { BenchView } from '#shared/contract/views'
import { dateAndTime, timeOfDay } from '#shared/contract/school-time'
import type { RouteStage } from '#shared/domain/rubric/route-state'

/** What a student waits for or was told: points that were asked, told, sent back or stopped, and stages being scored. */
export function waitingLines(stages: readonly RouteStage[]): BenchView['waiting'] {
  return stages.flatMap((stage) => {
    const to = stage.submission ? `/proof/${stage.submission.id}` : '/route-card'
    const points = stage.points.filter(point => ['asked', 'told', 'sent back', 'stopped'].includes(point.state)).map(point => ({
      title: point.name,
      detail: [stage.name, point.waitUntil === null ? '' : `wait until ${timeOfDay(iso(point.waitUntil))}`, point.at === null ? '' : dateAndTime(iso(point.at))].filter(Boolean).join(', '),
      state: point.state,
      to,
    }))
    const scored = points.length === 0 && stage.submission?.state === 'asked' ? [{ title: stage.name, detail: 'Being scored', state: 'asked', to }] : []
    return [...points, ...scored]
  })
}

const iso = (at: number) => new Date(at).toISOString()
