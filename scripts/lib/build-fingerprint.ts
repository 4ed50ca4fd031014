import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs'
import { join } from 'node:path'

/** What a build is made of. Tests and scripts are not in it. */
const sources = [
  'app.vue', 'error.vue', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json',
  'assets', 'components', 'composables', 'content', 'layouts', 'middleware', 'pages', 'plugins', 'public', 'server', 'shared', 'stores', 'types', 'utils',
]

/** A hash over the name and content of every file a build reads; two equal ones need no second build. */
export function buildFingerprint(root: string): string {
  const hash = createHash('sha256')
  const add = (path: string): void => {
    const full = join(root, path)
    if (statSync(full).isDirectory()) {
      for (const name of readdirSync(full).sort()) add(join(path, name))
      return
    }
    const body = readFileSync(full)
    hash.update(`${path}\0${body.length}\0`).update(body)
  }
  for (const path of sources) if (existsSync(join(root, path))) add(path)
  return hash.digest('hex')
}
