import { isStillRunning, type ProcessMark } from './process-record'
import { waitUntil } from './wait-until'

/** Asks a process to end and, when it has not in time, ends it. Nothing happens to a stranger who has its number now. */
export async function endProcess(mark: ProcessMark, withinMs = 28_000): Promise<void> {
  if (!isStillRunning(mark)) return
  process.kill(mark.pid, 'SIGTERM')
  if (await waitUntil(() => !isStillRunning(mark), withinMs)) return
  process.kill(mark.pid, 'SIGKILL')
  await waitUntil(() => !isStillRunning(mark), 5_000)
}
