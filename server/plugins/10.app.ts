import { defineNitroPlugin } from 'nitropack/runtime'
import { startWorker } from '../jobs/worker'
import { getApp } from '../utils/app'

/** Connects at start rather than at the first request, runs the worker where this process is one, and closes in order. */
export default defineNitroPlugin(async (nitro) => {
  const starting = getApp()
  nitro.hooks.hook('close', async () => (await starting).close())
  try {
    const app = await starting
    if (app.config.role !== 'web') await startWorker(app)
  }
  catch (fault) {
    console.error(fault instanceof Error ? fault.message : fault)
    process.exit(1)
  }
})
