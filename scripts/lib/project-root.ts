import { resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The folder package.json is in. */
export const projectRoot = resolve(fileURLToPath(new URL('../../', import.meta.url)))
