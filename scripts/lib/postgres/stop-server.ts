import { waitUntil } from '../wait-until'
import { runningServer } from './running-server'

/** Ends the server in that folder, if one is at work: open work is rolled back, nothing committed is lost. */
export async function stopServer(realDir: string): Promise<void> {
  const running = runningServer(realDir)
  if (!running) return
  // SIGINT is PostgreSQL's "fast" shutdown: it does not wait for clients.
  process.kill(running.pid, 'SIGINT')
  if (await waitUntil(() => runningServer(realDir) === null, 20_000)) return
  process.kill(running.pid, 'SIGQUIT')
  await waitUntil(() => runningServer(realDir) === null, 10_000)
}
