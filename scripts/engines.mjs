/** `npm run engines`: fails when a package in package-lock.json refuses the oldest Node we promise to run on. */
import { readFileSync } from 'node:fs'
import semver from 'semver'

const read = name => JSON.parse(readFileSync(new URL(`../${name}`, import.meta.url), 'utf8'))
const oldest = semver.minVersion(read('package.json').engines.node)
const refusing = Object.entries(read('package-lock.json').packages).filter(([path, entry]) => {
  const range = entry.engines?.node
  // An optional package that does not fit is simply left out by npm.
  return path !== '' && range && !entry.optional && !semver.satisfies(oldest, range)
})
for (const [path, entry] of refusing) console.error(`${path} ${entry.version} wants Node ${entry.engines.node}`)
console.log(`${refusing.length === 0 ? 'Every locked package runs' : `${refusing.length} locked packages do not run`} on Node ${oldest}.`)
process.exitCode = refusing.length === 0 ? 0 : 1
