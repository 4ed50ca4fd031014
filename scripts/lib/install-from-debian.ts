import { existsSync } from 'node:fs'
import { Problem } from './problem'
import { run } from './run'

/**
 * Installs a package of Debian's when we may, and says what to type when we may not.
 *
 * @param what the thing in a person's words, for the sentence
 * @throws {Problem} without root, without apt, or when apt fails
 */
export async function installFromDebian(packageName: string, what: string, say: (line: string) => void): Promise<void> {
  if (!existsSync('/usr/bin/apt-get')) throw new Problem(`${what} is not on this machine, and neither is apt-get to bring it. Install ${what} and start again.`)
  if (process.getuid?.() !== 0) {
    throw new Problem(`${what} is not on this machine, and only root can install it. Type: sudo apt-get install ${packageName}   and start again.`)
  }
  say(`Bringing ${what} from Debian (about half a minute) ...`)
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  // Another apt may be at work: wait for its lock instead of failing.
  const patient = ['-o', 'DPkg::Lock::Timeout=300', '-q', '-y']
  const install = () => run('apt-get', [...patient, 'install', '--no-install-recommends', packageName], { env })
  let ran = await install()
  if (ran.code !== 0) {
    const update = await run('apt-get', [...patient, 'update'], { env })
    ran = update.code === 0 ? await install() : update
  }
  if (ran.code !== 0) throw new Problem(`apt-get could not install ${packageName}. It said:\n${ran.output.trim().split('\n').slice(-8).join('\n')}`)
}
