/** `npm run stop`: ends what `npm start` began, also when it was killed, and both PostgreSQL clusters of this copy of the project. */
import { existsSync, realpathSync } from 'node:fs'
import { join } from 'node:path'
import { endProcess } from './lib/end-process'
import { stopServer } from './lib/postgres/stop-server'
import { readRunRecord, removeRunRecord } from './lib/process-record'
import { runCommand } from './lib/run-command'
import { readSettings } from './lib/settings'
import { runRecordFile } from './lib/take-the-place'

await runCommand(async () => {
  const { dataDir } = readSettings(process.env)
  const file = runRecordFile(dataDir)
  const running = readRunRecord(file)
  if (running) {
    // The starter ends the others in order; whoever is left after it is ended here.
    await endProcess(running.starter, 40_000)
    await Promise.all(running.children.map(child => endProcess(child)))
    removeRunRecord(file)
  }
  for (const name of ['postgres', 'test-postgres']) {
    const dir = join(dataDir, name)
    if (existsSync(dir)) await stopServer(realpathSync(dir))
  }
  console.log('Nothing of it is running any more.')
})
