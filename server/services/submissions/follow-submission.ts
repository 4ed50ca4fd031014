import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findActor } from '#server/utils/session'
import { findSubmission, type FoundSubmission } from './find-submission'

/** One message of the stream: its id tells a page that comes back whether it missed anything. */
export interface Followed { id: string, event: 'submission' | 'beat', data: string }

export interface Following {
  app: App
  actor: Actor
  submissionId: string
  /** What the page saw last, when it comes back after a cut. */
  lastSeen: string | null
  push: (message: Followed) => Promise<void>
  /** Ends the stream: the person may not follow any more, or the connection is gone. */
  end: () => void
  /** How often session, role and ownership are looked at again, ms. */
  checkEveryMs?: number
  beatEveryMs?: number
}

const roles = ['student', 'instructor', 'admin'] as const

/**
 * Follows a submission: its state at once, then again whenever something of it changes. Session, role and ownership are read fresh
 * before every message and once a minute; when they do not hold any more the stream ends and says nothing.
 *
 * @returns what stops it
 * @throws {Refusal} submission_not_found or too_many_streams, before anything is sent
 */
export async function followSubmission(following: Following): Promise<() => void> {
  const { app, actor, submissionId, push, end } = following
  // Found before it is counted: a refusal holds no stream.
  await findSubmission(app.orm.em.fork(), app, actor, submissionId)
  const give = app.streams.take(actor.id)
  let stopped = false
  let last = following.lastSeen

  function stop() {
    if (stopped) return
    stopped = true
    give()
    off()
    clearInterval(checks)
    clearInterval(beats)
  }
  function finish() {
    stop()
    end()
  }

  /** One at a time, in order; a signal heard meanwhile is told after. */
  let turn = Promise.resolve()
  function inTurn(work: () => Promise<void>) {
    turn = turn.then(async () => {
      if (!stopped) await work()
    }).catch(finish)
  }

  async function look(): Promise<FoundSubmission> {
    const em = app.orm.em.fork()
    const now = await findActor(em, actor.sessionId)
    if (!now) throw new Refusal('sign_in_needed')
    if (!roles.some(role => now.roles.includes(role))) throw new Refusal('not_allowed')
    return findSubmission(em, app, now, submissionId)
  }
  async function tell(always: boolean) {
    const submission = await look()
    const id = `${submission.version}.${submission.scoredVersion ?? 0}.${submission.state}`
    if (!always && id === last) return
    last = id
    await push({ id, event: 'submission', data: JSON.stringify({
      id: submission.id, state: submission.state, version: submission.version, scoredVersion: submission.scoredVersion ?? null,
      score: submission.score ?? null, word: submission.word ?? null, decision: submission.decision ?? null,
    }) })
  }

  // Heard before the first look, so that nothing falls between the two.
  const off = app.signals.onSubmission(submissionId, () => inTurn(() => tell(true)))
  // Telling only what changed also makes good a signal that was lost with its connection.
  const checks = setInterval(() => inTurn(() => tell(false)), following.checkEveryMs ?? 60_000)
  const beat = () => push({ id: last ?? '', event: 'beat', data: '' })
  const beats = setInterval(() => inTurn(beat), following.beatEveryMs ?? 15_000)
  inTurn(() => tell(false))
  // With nothing new to tell, this is what opens the stream on the other side.
  inTurn(beat)
  return stop
}
