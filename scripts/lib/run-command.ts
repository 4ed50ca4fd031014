import { Problem } from './problem'

/** Runs the body of one command of ours: a problem is printed as its sentence, anything else whole; both end the process with 1. */
export async function runCommand(body: () => Promise<void>): Promise<void> {
  try {
    await body()
  }
  catch (error) {
    if (error instanceof Problem) process.stderr.write(`\n${error.message}\n`)
    else console.error(error)
    // Not left to the last open handle: something half-started must not keep a failed command alive.
    process.exitCode = 1
    setTimeout(() => process.exit(), 1000).unref()
  }
}
