import type { Criterion } from '../criterion'
import type { EvidenceSet, JudgedUnit, ReadingEvidence } from '../evidence'
import { readingsOf } from '../readings-of'

/** The newest reading before the cut and the newest after it, at one spot where the quantity has any. */
export function pair(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, spot: string | null): { before: ReadingEvidence | undefined, after: ReadingEvidence | undefined } {
  const asked = { quantity: criterion.quantity, unit, ...(spot === null ? {} : { spot }) }
  return { before: readingsOf(evidence, { ...asked, when: 'before' })[0], after: readingsOf(evidence, { ...asked, when: 'after' })[0] }
}

/** One of the two is missing. */
export const bothWanted = { notAssessed: 'It takes a reading before the cut and one after it.' }
