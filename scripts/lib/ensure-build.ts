import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { buildFingerprint } from './build-fingerprint'
import { Problem } from './problem'
import { projectRoot } from './project-root'
import { run } from './run'
import { withFileLock } from './with-file-lock'

/**
 * Builds the application unless what is in .output was built from exactly these sources.
 *
 * @throws {Problem} with the last lines of the build when it fails
 */
export async function ensureBuild(dataDir: string, say: (line: string) => void): Promise<void> {
  // Two builds at once would write over each other.
  await withFileLock(join(dataDir, 'build.lock'), async () => {
    const outputDir = join(projectRoot, '.output')
    const stamp = join(outputDir, '.built-from')
    const wanted = buildFingerprint(projectRoot)
    if (existsSync(join(outputDir, 'server/index.mjs')) && existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return
    say('Building the application (about a minute) ...')
    // First: a build that is killed must not look like a finished one.
    rmSync(stamp, { force: true })
    const ran = await run(process.execPath, ['node_modules/nuxt/bin/nuxt.mjs', 'build'], {
      cwd: projectRoot,
      env: { ...process.env, NODE_ENV: 'production', AUTH_ORIGIN: process.env.AUTH_ORIGIN ?? 'http://127.0.0.1:3000/api/auth', NUXT_TELEMETRY_DISABLED: '1' },
    })
    if (ran.code !== 0) throw new Problem(`The build failed:\n${ran.output.trim().split('\n').slice(-25).join('\n')}`)
    writeFileSync(stamp, wanted)
  })
}
