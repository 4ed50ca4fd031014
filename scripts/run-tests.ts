/** `npm test`: everything that is checked, from nothing, and one closing line with the sum. `npm test -- lint domain` runs those steps alone. */
import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuild } from './lib/ensure-build'
import { installFromDebian } from './lib/install-from-debian'
import { testCluster } from './lib/own-cluster'
import { startCluster } from './lib/postgres/start-cluster'
import { Problem } from './lib/problem'
import { projectRoot } from './lib/project-root'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'
import { runStep, type Step, type StepResult } from './lib/test-step'

const say = (line: string) => console.log(line)
const origin = { AUTH_ORIGIN: 'http://127.0.0.1:3000/api/auth', NUXT_TELEMETRY_DISABLED: '1' }
const vitest = (project: string): Step => ({
  name: project, script: 'node_modules/vitest/vitest.mjs',
  args: ['run', '--project', project, '--reporter=default', '--reporter=json', `--outputFile.json=test-results/${project}.json`],
  env: origin, report: { kind: 'vitest', file: `test-results/${project}.json` },
})

/** In order; steps that stand in one row run beside each other, since each keeps one core busy. */
const rows: Step[][] = [
  [{ name: 'engines', script: 'scripts/engines.mjs' }],
  [{ name: 'types of nuxt', script: 'node_modules/nuxt/bin/nuxt.mjs', args: ['prepare'], env: origin }],
  [
    { name: 'lint', script: 'node_modules/eslint/bin/eslint.js', args: ['.'] },
    { name: 'typecheck', script: 'node_modules/vue-tsc/bin/vue-tsc.js', args: ['-b', '--noEmit'] },
  ],
  [
    { name: 'typecheck of tests', script: 'node_modules/typescript/bin/tsc', args: ['-p', 'tests/tsconfig.json'] },
    { name: 'typecheck of app tests', script: 'node_modules/vue-tsc/bin/vue-tsc.js', args: ['-p', 'tests/app/tsconfig.json'] },
  ],
  [vitest('domain')], [vitest('meta')], [vitest('server')], [vitest('app')],
]
const steps = rows.flat()
const killing: Step = { name: 'kill', script: 'node_modules/tsx/dist/cli.mjs', args: ['--tsconfig', 'scripts/tsconfig.json', 'scripts/kill.ts', '3'], env: origin }
const depositing: Step = { name: 'deposits', script: 'node_modules/tsx/dist/cli.mjs', args: ['--tsconfig', 'scripts/tsconfig.json', 'scripts/deposits.ts', '12', '--kills', '2', '--sweep-now'], env: origin }
const endToEnd: Step = {
  name: 'e2e', script: 'node_modules/@playwright/test/cli.js', args: ['test', '--reporter=line,json'],
  env: { ...origin, PLAYWRIGHT_JSON_OUTPUT_NAME: 'test-results/e2e.json' }, report: { kind: 'playwright', file: 'test-results/e2e.json' },
}

await runCommand(async () => {
  const began = performance.now()
  const only = process.argv.slice(2).filter(arg => !arg.startsWith('-'))
  const unknown = only.filter(name => ![...steps, killing, depositing, endToEnd].some(step => step.name === name) && name !== 'build')
  if (unknown.length > 0) throw new Problem(`There is no step called ${unknown.join(', ')}. They are: ${[...steps.map(step => step.name), 'build', 'kill', 'deposits', 'e2e'].join(', ')}.`)
  const wanted = (name: string) => only.length === 0 || only.includes(name)

  const settings = readSettings(process.env)
  const secrets = readOrMakeSecrets(settings.dataDir)
  const results: StepResult[] = []
  if (wanted('server') || wanted('kill') || wanted('deposits') || wanted('e2e')) await startCluster(testCluster(settings.dataDir, settings.testDatabasePort, secrets), say)
  if (wanted('e2e') && !existsSync(process.env.CHROMIUM ?? '/usr/bin/chromium')) await installFromDebian('chromium', 'Chromium', say)

  for (const row of rows) results.push(...await Promise.all(row.filter(step => wanted(step.name)).map(runStep)))
  const hasWalks = readdirSync(join(projectRoot, 'tests/e2e'), { recursive: true }).some(name => String(name).endsWith('.spec.ts'))
  if (wanted('build') || wanted('kill') || wanted('deposits') || wanted('e2e')) {
    const built = await timed('build', () => ensureBuild(settings.dataDir, say))
    results.push(built)
    if (built.ok && wanted('kill')) results.push(await runStep(killing))
    if (built.ok && wanted('deposits')) results.push(await runStep(depositing))
    // Walks over an old build would say nothing about these sources.
    if (built.ok && wanted('e2e') && hasWalks) results.push(await runStep(endToEnd))
  }

  console.log('')
  for (const result of results) {
    const tests = result.passed + result.failed + result.skipped > 0 ? `   ${result.passed} passed, ${result.failed} failed${result.skipped > 0 ? `, ${result.skipped} skipped` : ''}` : ''
    console.log(`${result.ok ? 'well    ' : 'NOT WELL'}  ${result.name.padEnd(22)} ${result.seconds.toFixed(1).padStart(6)} s${tests}`)
  }
  console.log(`          everything             ${((performance.now() - began) / 1000).toFixed(1).padStart(6)} s`)
  const sum = (of: 'passed' | 'failed') => results.reduce((total, result) => total + result[of], 0)
  if (results.some(result => !result.ok)) process.exitCode = 1
  console.log(`${sum('passed')} passed, ${sum('failed')} failed`)
})

async function timed(name: string, work: () => Promise<void>): Promise<StepResult> {
  console.log(`\n── ${name} ${'─'.repeat(70 - name.length)}`)
  const began = performance.now()
  let ok = true
  try {
    await work()
  }
  catch (thrown) {
    ok = false
    console.error(thrown instanceof Problem ? thrown.message : thrown)
  }
  return { name, seconds: (performance.now() - began) / 1000, ok, passed: 0, failed: ok ? 0 : 1, skipped: 0 }
}
