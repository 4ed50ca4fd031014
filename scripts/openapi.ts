import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describeApi } from './lib/describe-api'
import { projectRoot } from './lib/project-root'

/** Writes server/openapi.json from what every route says of itself. Run it after adding or changing a route. */
const description = await describeApi()
writeFileSync(join(projectRoot, 'server/openapi.json'), `${JSON.stringify(description, null, 1)}\n`)
console.log(`${Object.keys(description.paths as object).length} addresses described in server/openapi.json`)
