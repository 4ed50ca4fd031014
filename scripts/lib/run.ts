import { spawn, type SpawnOptions } from 'node:child_process'

export type Ran = { code: number, output: string }

/**
 * Runs a command to its end and keeps what it said on both streams together.
 *
 * @throws when the command cannot be started at all; a non-zero end is an answer, not an error
 */
export function run(command: string, args: readonly string[], options: SpawnOptions & { input?: string } = {}): Promise<Ran> {
  const { input, ...rest } = options
  return new Promise((resolve, reject) => {
    const child = spawn(command, [...args], { ...rest, stdio: ['pipe', 'pipe', 'pipe'] })
    let output = ''
    child.stdout?.on('data', chunk => output += String(chunk))
    child.stderr?.on('data', chunk => output += String(chunk))
    child.on('error', reject)
    child.on('close', (code, signal) => resolve({ code: code ?? (signal ? 1 : 0), output }))
    // A command that ends before it has read its input is no fault of ours.
    child.stdin?.on('error', () => {})
    child.stdin?.end(input ?? '')
  })
}
