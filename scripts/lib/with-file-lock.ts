import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import { Problem } from './problem'
import { waitUntil } from './wait-until'

/**
 * Runs the work while no other process of this machine holds the same file.
 * A lock left by a killed process is taken over.
 *
 * @throws {Problem} when another live process holds it for over two minutes
 */
export async function withFileLock<T>(file: string, work: () => Promise<T>): Promise<T> {
  mkdirSync(dirname(file), { recursive: true })
  const take = (): boolean => {
    try {
      writeFileSync(file, String(process.pid), { flag: 'wx' })
      return true
    }
    catch {
      const holder = read(file)
      if (holder !== null && !isAlive(holder)) rmSync(file, { force: true })
      return false
    }
  }
  if (!await waitUntil(take, 120_000)) throw new Problem(`Process ${read(file)} has held ${file} for two minutes. Stop it, or remove that file.`)
  try {
    return await work()
  }
  finally {
    rmSync(file, { force: true })
  }
}

function read(file: string): number | null {
  try {
    return Number(readFileSync(file, 'utf8')) || null
  }
  catch {
    return null
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  }
  catch (error) {
    return (error as { code?: string }).code === 'EPERM'
  }
}
