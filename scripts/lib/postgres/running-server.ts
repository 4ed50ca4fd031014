import { readFileSync, readlinkSync } from 'node:fs'
import { join } from 'node:path'

export type Running = { pid: number, port: number, ready: boolean }

/**
 * The server at work in that folder, or null.
 *
 * A pid left by a killed server may by now belong to a stranger, so it counts only when that process stands in the data folder.
 */
export function runningServer(realDir: string): Running | null {
  let lines: string[]
  try {
    lines = readFileSync(join(realDir, 'postmaster.pid'), 'utf8').split('\n')
  }
  catch {
    return null
  }
  const pid = Number(lines[0])
  if (!Number.isInteger(pid) || pid <= 1) return null
  try {
    if (readlinkSync(`/proc/${pid}/cwd`) !== realDir) return null
  }
  catch {
    return null
  }
  return { pid, port: Number(lines[3]), ready: (lines[7] ?? '').trim() === 'ready' }
}
