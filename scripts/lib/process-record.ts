import { existsSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'

/** A process by its number and the moment it began: numbers are given again, moments are not. */
export type ProcessMark = { pid: number, began: string }
export type RunRecord = { starter: ProcessMark, url: string, children: ProcessMark[] }

/** Null when there is no such process. */
export function markOf(pid: number): ProcessMark | null {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The command's name, in brackets, may hold spaces; the fields are counted behind it (proc(5): state is 3, starttime 22).
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    if (fields[0] === 'Z') return null
    return { pid, began: fields[19] ?? '' }
  }
  catch {
    return null
  }
}

export const isStillRunning = (mark: ProcessMark): boolean => markOf(mark.pid)?.began === mark.began

export function readRunRecord(file: string): RunRecord | null {
  if (!existsSync(file)) return null
  try {
    return JSON.parse(readFileSync(file, 'utf8')) as RunRecord
  }
  catch {
    return null
  }
}

export function writeRunRecord(file: string, record: RunRecord): void {
  writeFileSync(`${file}.new`, JSON.stringify(record))
  renameSync(`${file}.new`, file)
}

export const removeRunRecord = (file: string): void => rmSync(file, { force: true })
