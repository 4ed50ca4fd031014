import { spawn, type ChildProcess } from 'node:child_process'
import { setTimeout as sleep } from 'node:timers/promises'
import { endProcess } from './end-process'
import { markOf, type ProcessMark } from './process-record'

export type Supervised = {
  name: string
  mark: () => ProcessMark | null
  /** The last lines it said, for a sentence about why it ended. */
  tail: () => string
  /** True once it has ended too often to be started again. */
  hasGivenUp: () => boolean
  stop: () => Promise<void>
}

const mostEndsAMinute = 5

/**
 * Keeps a Node process of ours running: one that ends without being asked is started again half a second later,
 * until it has ended five times within a minute.
 */
export function supervise(name: string, args: readonly string[], env: NodeJS.ProcessEnv, say: (line: string) => void, onChange: () => void = () => {}): Supervised {
  let child: ChildProcess | null = null
  let mark: ProcessMark | null = null
  let stopping = false
  let givenUp = false
  const ends: number[] = []
  const lines: string[] = []

  const start = () => {
    if (stopping) return
    // In a group of its own: Ctrl-C goes to us alone, and we end it in order.
    child = spawn(process.execPath, [...args], { env, stdio: ['ignore', 'pipe', 'pipe'], detached: true })
    mark = child.pid === undefined ? null : markOf(child.pid)
    for (const stream of [child.stdout, child.stderr]) {
      stream?.setEncoding('utf8').on('data', (chunk: string) => {
        for (const line of chunk.split('\n').filter(text => text.trim() !== '')) {
          lines.push(line)
          if (lines.length > 40) lines.shift()
          say(`${name} | ${line}`)
        }
      })
    }
    child.once('exit', (code, signal) => {
      mark = null
      if (stopping) return
      const now = performance.now()
      ends.push(now)
      while (ends.length > 0 && now - (ends[0] ?? 0) > 60_000) ends.shift()
      givenUp = ends.length >= mostEndsAMinute
      say(`${name} ended (${signal ?? code})${givenUp ? ' too often, and is not started again' : '; starting it again'}`)
      onChange()
      if (!givenUp) void sleep(500).then(start)
    })
    onChange()
  }
  start()

  return {
    name,
    mark: () => mark,
    tail: () => lines.slice(-12).join('\n'),
    hasGivenUp: () => givenUp,
    async stop() {
      stopping = true
      if (mark) await endProcess(mark)
    },
  }
}
