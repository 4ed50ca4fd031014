import type { SheetNeed } from '#server/db/entities/FlowSheet'
import type { SheetReading } from '#shared/domain/airflow/sheet/sheet-reading'

/** The reader's questions with the answers to pick from, where they are few; what else it may be is typed. */
export function needChoices({ needs, findings }: Pick<SheetReading, 'needs' | 'findings'>, cylinders: number, benches: readonly string[]): SheetNeed[] {
  return needs.map((need): SheetNeed => {
    switch (need.field) {
      case 'bench': return { ...need, choices: [...benches] }
      case 'cylinder': return { ...need, choices: Array.from({ length: cylinders }, (_, index) => String(index + 1)) }
      case 'side': return { ...need, choices: ['intake', 'exhaust'] }
      case 'stage': return { ...need, choices: ['baseline', 'bowl', 'port', 'short turn', 'final'] }
      case 'lift-unit': return { ...need, choices: ['mm', 'in', 'thou', 'lift/diameter'] }
      case 'flow-unit': return { ...need, choices: ['cfm', 'l/s', 'l/min', 'm3/h', 'm3/min', 'kg/h', 'g/s', 'lb/min'] }
      case 'pressure-unit': return { ...need, choices: ['inH2O', 'mmH2O', 'cmH2O', 'kPa', 'Pa', 'mbar', 'inHg', 'psi'] }
      case 'date': {
        const dates = findings.filter(one => one.code === 'ambiguous-date').flatMap(one => one.text.match(/\d{4}-\d{2}-\d{2}/g) ?? [])
        return dates.length === 2 ? { ...need, choices: dates } : need
      }
      case 'columns': return { ...need, question: `${need.question} Count from 1: 1 lift mm, 2 flow cfm.` }
      default: return need
    }
  })
}
