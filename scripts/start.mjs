import { runScript } from './lib/run-script.mjs'

await runScript('start')
