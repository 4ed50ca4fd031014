import { fileURLToPath } from 'node:url'
import { ensurePackages } from './ensure-packages.mjs'

const root = fileURLToPath(new URL('../../', import.meta.url))

/**
 * Runs a TypeScript command of ours in this process, after making sure of the packages it needs.
 *
 * @param {string} name its file in scripts/, without the ending
 */
export async function runScript(name) {
  ensurePackages(root)
  process.chdir(root)
  // The SDK warns at every start that it will want a newer Node one day; the lock file holds it where it is.
  process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= 'true'
  const { register } = await import('tsx/esm/api')
  register({ tsconfig: `${root}scripts/tsconfig.json` })
  await import(`../${name}.ts`)
}
