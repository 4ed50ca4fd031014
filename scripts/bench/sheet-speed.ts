import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import papa from 'papaparse'
import { decodeSheetBytes } from '../../shared/domain/airflow/sheet/decode-sheet-bytes'
import { readFlowSheet } from '../../shared/domain/airflow/sheet/read-flow-sheet'
import { splitDelimitedText } from '../../shared/domain/airflow/sheet/split-delimited-text'
import { projectRoot } from '../lib/project-root'

export interface SheetSpeed { sheets: number, perSecond: number, barePerSecond: number, timesBare: number }

const folder = join(projectRoot, 'tests/fixtures/sheets')
const shortestMs = 1500

/** How fast flow sheets are read, bytes to runs on one basis, beside a bare split of the same bytes into cells. In turn, for as long each. */
export function sheetSpeed(): SheetSpeed {
  const files = readdirSync(folder).filter(name => /\.(csv|tsv)$/.test(name)).map(name => readFileSync(join(folder, name)))
  const read = () => files.forEach(bytes => readFlowSheet(splitDelimitedText(decodeSheetBytes(bytes))))
  const split = () => files.forEach(bytes => papa.parse(bytes.toString('utf8')))
  let reading = 0
  let splitting = 0
  let rounds = -10
  // The first rounds warm both up and are not counted.
  while (reading < shortestMs) {
    const times = [timeOf(read), timeOf(split)] as const
    if (++rounds <= 0) continue
    reading += times[0]
    splitting += times[1]
  }
  const perSecond = files.length * rounds / reading * 1000
  const barePerSecond = files.length * rounds / splitting * 1000
  return { sheets: files.length, perSecond, barePerSecond, timesBare: barePerSecond / perSecond }
}

function timeOf(work: () => void): number {
  const began = performance.now()
  work()
  return performance.now() - began
}
