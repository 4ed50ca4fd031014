/**
 * Prints, for every criterion of the school's rubric, its quantity, how this version evaluates it, and whether its accept set can be
 * reached. Exits 1 when a must has a band in which nothing could be accepted.
 *
 *   npm run criteria
 */
import { readFileSync } from 'node:fs'
import type { Criterion, Rubric } from '../shared/domain/rubric/criterion'
import { evaluatorOf } from '../shared/domain/rubric/evaluators'
import { unreachableBands } from '../shared/domain/rubric/unreachable-bands'

const rubric = JSON.parse(readFileSync(new URL('../content/school/rubric.json', import.meta.url), 'utf8')) as Rubric

function howEvaluated(criterion: Criterion): string {
  if (criterion.kind === 'judged') return 'given by the instructor'
  if (!evaluatorOf(criterion)) return `not assessed in this version, because nothing measures ${criterion.quantity}`
  if (criterion.rule === 'flow-loss') return `${criterion.quantity}, by the rule of flow losses`
  return criterion.kind === 'photo-measured' && !criterion.wants.some(want => want.kind === 'reading')
    ? `${criterion.quantity}, a typed reading until the photo is measured`
    : criterion.quantity
}

const rows = rubric.stages.flatMap(stage => stage.criteria).map((criterion) => {
  const unreachable = unreachableBands(criterion)
  return {
    id: criterion.id,
    quantity: criterion.quantity,
    must: criterion.safetyStop ? 'must, stop' : criterion.mustPass ? 'must' : '',
    evaluator: howEvaluated(criterion),
    reachable: unreachable.length === 0 ? 'yes' : `no: ${unreachable.map(one => `${one.scope}: ${one.why}`).join('; ')}`,
    stops: criterion.mustPass && unreachable.length > 0,
  }
})
const columns = ['id', 'quantity', 'must', 'evaluator', 'reachable'] as const
const widths = columns.map(column => Math.max(column.length, ...rows.map(row => row[column].length)))
const line = (cells: readonly string[]) => cells.map((cell, index) => cell.padEnd(widths[index] ?? 0)).join('  ').trimEnd()
console.log(line(columns))
console.log(line(widths.map(width => '-'.repeat(width))))
for (const row of rows) console.log(line(columns.map(column => row[column])))
const missing = rows.filter(row => row.evaluator.startsWith('not assessed'))
console.log(`\n${rows.length} criteria, ${missing.length} not assessed in this version, ${rows.filter(row => row.reachable !== 'yes').length} with a band nothing can reach`)
if (rows.some(row => row.stops)) process.exitCode = 1
