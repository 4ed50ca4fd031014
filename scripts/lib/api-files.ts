import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { projectRoot } from './project-root'

export interface ApiFile {
  /** From the project's root: "server/api/heads/[id]/index.get.ts". */
  file: string
  absolute: string
  /** "/api/heads/{id}"; a catch-all ends in "{path}". */
  path: string
  /** Lower case; null when the file takes every method. */
  method: string | null
}

/** Every file under server/api with the address and method Nitro gives it. */
export function apiFiles(root = projectRoot): ApiFile[] {
  return readdirSync(join(root, 'server/api'), { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts')).sort().map((name) => {
    const file = `server/api/${name.replaceAll('\\', '/')}`
    const address = file.slice('server'.length, -'.ts'.length)
    const found = /^(.*)\.(get|post|put|patch|delete)$/.exec(address)
    const path = (found?.[1] ?? address).replace(/\/index$/, '').replace(/\[\.\.\..*\]$/, '{path}').replace(/\[(\w+)\]/g, '{$1}')
    return { file, absolute: join(root, file), path, method: found?.[2] ?? null }
  })
}
