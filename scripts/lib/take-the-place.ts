import { join } from 'node:path'
import { endProcess } from './end-process'
import { isPortOpen } from './is-port-open'
import { Problem } from './problem'
import { isStillRunning, markOf, readRunRecord, removeRunRecord, writeRunRecord, type ProcessMark } from './process-record'
import type { Settings } from './settings'

export type Place = { record: (children: ProcessMark[]) => void, leave: () => void }

/**
 * Makes sure that this is the only start of this copy of the project, ends what a killed one left running, and keeps a note of
 * who runs, for the next start and for `npm run stop`.
 *
 * @throws {Problem} when one is running, or the web's number is taken by a stranger
 */
export async function takeThePlace(settings: Settings, url: string): Promise<Place> {
  const file = runRecordFile(settings.dataDir)
  const before = readRunRecord(file)
  if (before) {
    if (before.starter.pid !== process.pid && isStillRunning(before.starter)) {
      throw new Problem(`It is running already at ${before.url} (process ${before.starter.pid}). To end it: npm run stop`)
    }
    await Promise.all(before.children.map(child => endProcess(child)))
    removeRunRecord(file)
  }
  if (await isPortOpen(settings.webPort, settings.host)) {
    throw new Problem(`Something else answers on ${settings.host}:${settings.webPort}. Stop it, or choose another number: PORT=3001 npm start`)
  }
  const starter = markOf(process.pid) ?? { pid: process.pid, began: '' }
  const record = (children: ProcessMark[]) => writeRunRecord(file, { starter, url, children })
  record([])
  return { record, leave: () => removeRunRecord(file) }
}

export const runRecordFile = (dataDir: string): string => join(dataDir, 'running.json')
