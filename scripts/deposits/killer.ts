import { setTimeout as wait } from 'node:timers/promises'
import type { KeptProcess } from './kept-process'

/** Kills one of the processes, whichever, as deposits go by; a moment after one is done, so that others are in the middle. */
export class Killer {
  private done = 0
  private killed = 0
  /** Whom the next ones hit: each equally often, in an order of chance. */
  private targets: KeptProcess[] = []

  constructor(private readonly processes: readonly KeptProcess[], private readonly kills: number, private readonly deposits: number) {}

  async oneMoreDone() {
    this.done += 1
    if (this.killed < this.kills && this.done * (this.kills + 1) >= (this.killed + 1) * this.deposits) await this.one()
  }

  async rest() {
    while (this.killed < this.kills) {
      await this.one()
      await wait(1500)
    }
  }

  private async one() {
    this.killed += 1
    await wait(Math.random() * 400)
    if (this.targets.length === 0) this.targets = [...this.processes]
    this.targets.splice(Math.floor(Math.random() * this.targets.length), 1)[0]?.kill()
  }
}
