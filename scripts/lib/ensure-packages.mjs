import { spawnSync } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'

/**
 * Installs what package-lock.json names, when it is not what node_modules holds. Plain Node: it runs before there is any package.
 *
 * npm writes node_modules/.package-lock.json last, so an install that was killed is seen as missing.
 *
 * @param {string} root
 */
export function ensurePackages(root) {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
  if (major < 20 || (major === 20 && minor < 19)) {
    stop(`Node ${process.versions.node} is too old: this needs 20.19 or newer.`)
  }
  if (!isInstalled(root)) {
    console.log('Installing packages (a minute or two) ...')
    const npm = spawnSync('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], { cwd: root, stdio: 'inherit', env: { ...process.env, NODE_ENV: '' } })
    if (npm.error) stop(`npm could not be started: ${npm.error.message}`)
    if (npm.status !== 0) stop('The packages could not be installed; what npm said is above. The first time needs a network or a filled npm cache.')
  }
}

/** @param {string} root */
function isInstalled(root) {
  const hidden = join(root, 'node_modules/.package-lock.json')
  if (!existsSync(hidden)) return false
  const wanted = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages
  const there = JSON.parse(readFileSync(hidden, 'utf8')).packages
  return Object.entries(wanted).every(([path, entry]) => path === '' || entry.optional || entry.link || entry.extraneous || there[path]?.version === entry.version)
}

/**
 * @param {string} sentence
 * @returns {never}
 */
function stop(sentence) {
  console.error(`\n${sentence}`)
  process.exit(1)
}
