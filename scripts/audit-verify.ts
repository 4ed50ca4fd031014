/**
 * `npm run audit:verify`: recomputes the audit chain and names the first bad row, a missing tail, and rows unsealed for over five
 * minutes. Ends with 1 when there is any.
 *
 * It prints the chain's head. Kept somewhere else (on paper will do), that line shows later whether the whole record was replaced:
 * `npm run audit:verify -- --expect 1234:<hash>` also asks for that link.
 */
import { MikroORM } from '@mikro-orm/postgresql'
import { dbConfig } from '../server/db/config'
import { verifyAudit } from '../server/services/audit/verify-audit'
import { ownDatabaseUrl } from './lib/own-database-url'
import { Problem } from './lib/problem'
import { runCommand } from './lib/run-command'

await runCommand(async () => {
  const expected = readExpected(process.argv.slice(2))
  const orm = await MikroORM.init({ ...dbConfig(ownDatabaseUrl()), connect: false })
  try {
    if (!(await orm.isConnected())) throw new Problem('The database does not answer. Start it with `npm start` or `npm run database`.')
    const em = orm.em.fork()
    const verdict = await verifyAudit(em, new Date())
    const lines = verdict.problems.map(problem => problem.sentence)
    if (expected) {
      const [link] = await em.getConnection().execute<{ hash: string }[]>('select hash from audit_link where number = ?', [expected.number])
      if (link?.hash !== expected.hash) lines.push(`Link ${expected.number} is not the one you kept: ${link ? 'its hash differs' : 'it is not there'}.`)
    }
    process.stdout.write(`${verdict.links} links followed, ${verdict.seals} seals. Head ${verdict.head.number}:${verdict.head.hash}\n`)
    for (const line of lines) process.stdout.write(`${line}\n`)
    process.stdout.write(lines.length === 0 ? 'The audit record is whole.\n' : 'The audit record is NOT whole.\n')
    if (lines.length > 0) process.exitCode = 1
  }
  finally {
    await orm.close(true)
  }
})

function readExpected(args: string[]): { number: number, hash: string } | null {
  const at = args.indexOf('--expect')
  if (at === -1) return null
  const match = /^(\d{1,9}):([0-9a-f]{64})$/.exec(args[at + 1] ?? '')
  if (!match) throw new Problem('After --expect comes a number and a hash, as this command prints them: 1234:<64 hex digits>.')
  return { number: Number(match[1]), hash: match[2] ?? '' }
}
