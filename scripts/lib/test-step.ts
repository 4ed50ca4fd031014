import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { projectRoot } from './project-root'

export type StepResult = { name: string, seconds: number, passed: number, failed: number, skipped: number, ok: boolean }

/** How a runner's own report is read. */
const counts = {
  vitest: (report: Report) => ({ passed: report.numPassedTests ?? 0, failed: report.numFailedTests ?? 0, skipped: (report.numPendingTests ?? 0) + (report.numTodoTests ?? 0) }),
  playwright: (report: Report) => ({ passed: report.stats?.expected ?? 0, failed: (report.stats?.unexpected ?? 0) + (report.stats?.flaky ?? 0), skipped: report.stats?.skipped ?? 0 }),
}
type Report = {
  numPassedTests?: number, numFailedTests?: number, numPendingTests?: number, numTodoTests?: number
  stats?: { expected: number, unexpected: number, flaky: number, skipped: number }
}

export type Step = {
  name: string
  /** A file in node_modules or scripts, run by this Node. */
  script: string
  args?: readonly string[]
  env?: Record<string, string>
  /** A runner of tests leaves a report here, and its counts are taken from it; any other step just ends well or not. */
  report?: { kind: keyof typeof counts, file: string }
}

/**
 * Runs one step of `npm test` and prints how long it took.
 *
 * A step that ends badly counts as at least one failure, so that the closing line can never look better than the run was:
 * lint, types and build have no tests to count, and a runner that dies leaves no report.
 */
export async function runStep(step: Step): Promise<StepResult> {
  console.log(`\n── ${step.name} ${'─'.repeat(Math.max(0, 70 - step.name.length))}`)
  const report = step.report ? join(projectRoot, step.report.file) : null
  if (report) {
    mkdirSync(dirname(report), { recursive: true })
    rmSync(report, { force: true })
  }
  const began = performance.now()
  const child = spawn(process.execPath, [step.script, ...step.args ?? []], { cwd: projectRoot, stdio: 'inherit', env: { ...process.env, ...step.env } })
  const [code] = await once(child, 'exit') as [number | null]
  const seconds = (performance.now() - began) / 1000

  let counted = { passed: 0, failed: 0, skipped: 0 }
  let readable = true
  if (report && step.report) {
    readable = existsSync(report)
    if (readable) counted = counts[step.report.kind](JSON.parse(readFileSync(report, 'utf8')) as Report)
  }
  const ok = code === 0 && readable && counted.failed === 0
  if (!ok && counted.failed === 0) counted.failed = 1
  console.log(`── ${step.name}: ${ok ? 'well' : 'NOT WELL'}, ${seconds.toFixed(1)} s`)
  return { name: step.name, seconds, ok, ...counted }
}
