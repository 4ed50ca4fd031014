import { readingQuantities } from '../../shared/contract/quantities'
import type { BenchView, GaugeView, SubmissionView } from '../../shared/contract/views'
import { readIron, type StoryCard } from '../seed/iron'
import { Problem } from '../lib/problem'
import type { Visitor } from './visitor'

export interface ScoreTime { who: string, op: number, readings: number, ms: number }

/**
 * From Ask to visible: each student whose next part is open reads what is wanted, without a photo, and asks; the clock runs from the
 * call until the page's stream of events says that this version is scored.
 *
 * @throws {Problem} when nobody's stage is open
 */
export async function scoreTimes(url: string, students: readonly Visitor[]): Promise<ScoreTime[]> {
  const times: ScoreTime[] = []
  for (const student of students) {
    const draft = await draftOf(student)
    if (!draft) continue
    const readings = await readWhatIsWanted(student, draft)
    times.push({ who: student.name, op: draft.op, readings, ms: await askAndWait(url, student, draft.id) })
  }
  if (times.length === 0) throw new Problem('No student of the school has an open stage to ask in.')
  return times
}

/** The draft of the part that is due; nothing where the stage is not open, or where photos lie in it already. */
async function draftOf(student: Visitor): Promise<SubmissionView | null> {
  const { head, next } = await student.get<BenchView>('/api/bench')
  if (!head || !next) return null
  const { status, body } = await student.post<{ id: string }>(`/api/heads/${head.id}/stages/${next.op}/submissions`, {})
  if (status >= 300) return null
  const draft = await student.get<SubmissionView>(`/api/submissions/${body.id}`)
  return draft.state === 'draft' && draft.photos.length === 0 ? draft : null
}

/** @returns how many readings were taken in */
async function readWhatIsWanted(student: Visitor, draft: SubmissionView): Promise<number> {
  const { casting } = await student.get<GaugeView>(`/api/submissions/${draft.id}/gauges`)
  let kept = 0
  for (const want of draft.wanted) {
    if (want.kind !== 'reading' || want.quantity === null) continue
    const read = readIron(casting as StoryCard, draft.head.number, { ...want, quantity: want.quantity, op: draft.op }, [])
    const unit = readingQuantities[want.quantity]?.baseUnit
    if (!read || !unit) continue
    const { status } = await student.post(`/api/submissions/${draft.id}/readings`, {
      quantity: want.quantity, cylinder: want.cylinder, side: want.side, ...(want.spot ? { at: { spot: want.spot } } : {}), ...(want.when ? { when: want.when } : {}),
      values: read.values, unit, instrument: read.instrument,
    })
    if (status === 201) kept++
  }
  return kept
}

async function askAndWait(url: string, student: Visitor, id: string): Promise<number> {
  const leave = new AbortController()
  const stream = await fetch(`${url}/api/submissions/${id}/events`, { headers: { cookie: student.cookie }, signal: AbortSignal.any([leave.signal, AbortSignal.timeout(60_000)]) })
  if (!stream.body) throw new Problem(`The events of ${id} could not be followed (${stream.status}).`)
  const events = stream.body.pipeThrough(new TextDecoderStream()).getReader()
  try {
    // The stream's first words: it is open, and nothing is scored.
    await events.read()
    const began = performance.now()
    const { status, body } = await student.post<unknown>(`/api/submissions/${id}/ask`, {})
    if (status !== 202) throw new Problem(`${student.name} could not ask (${status}): ${JSON.stringify(body)}`)
    let heard = ''
    for (;;) {
      const { value, done } = await events.read()
      if (done) throw new Problem(`The events of ${id} ended before it was scored.`)
      heard += value
      if (/"state":"scored"/.test(heard)) return performance.now() - began
    }
  }
  finally {
    leave.abort()
    await events.cancel().catch(() => undefined)
  }
}
