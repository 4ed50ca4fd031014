import { closeSync, fsyncSync, openSync, renameSync, writeSync } from 'node:fs'
import { dirname } from 'node:path'

/** Writes a small file so that after a kill, or a power cut, it is there whole or not at all. */
export function writeDurably(path: string, text: string): void {
  const beside = `${path}.new`
  const file = openSync(beside, 'w')
  writeSync(file, text)
  fsyncSync(file)
  closeSync(file)
  renameSync(beside, path)
  syncFolder(dirname(path))
}

/** A rename is only on the disk once its folder is. */
export function syncFolder(path: string): void {
  const folder = openSync(path, 'r')
  fsyncSync(folder)
  closeSync(folder)
}
