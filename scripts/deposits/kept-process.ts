import { spawn, type ChildProcess } from 'node:child_process'
import { join } from 'node:path'
import { projectRoot } from '../lib/project-root'

/** One of the application's processes, started again half a second after it is killed, as the supervisor would. */
export class KeptProcess {
  kills = 0
  private child: ChildProcess
  private ended = false

  constructor(readonly name: string, private readonly env: NodeJS.ProcessEnv) {
    this.child = this.start()
  }

  private start(): ChildProcess {
    const child = spawn(process.execPath, [join(projectRoot, '.output/server/index.mjs')], { env: this.env, stdio: ['ignore', 'ignore', 'pipe'] })
    child.stderr?.setEncoding('utf8').on('data', (chunk: string) => {
      // The stand-in's faults make the application say what it could not do; that is right, and too much to read.
      if (process.env.DEPOSITS_LOUD) process.stderr.write(`${this.name} | ${chunk}`)
    })
    child.once('exit', () => {
      if (!this.ended) setTimeout(() => this.ended || (this.child = this.start()), 500)
    })
    return child
  }

  kill() {
    this.kills += 1
    this.child.kill('SIGKILL')
  }

  end() {
    this.ended = true
    this.child.kill('SIGKILL')
  }
}
