import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { LedgerLine } from './LedgerLine'

/** The numbered paper of one ledger line; numbers go up by one and none is used twice. */
export const Receipt = defineEntity({
  name: 'Receipt',
  properties: {
    id: id(),
    number: p.integer().unique(),
    line: () => p.manyToOne(LedgerLine).ref().unique(),
    /** The PDF in storage; null until the job has made it. */
    key: p.string().length(200).nullable(),
    sha256: p.string().length(64).nullable(),
    issuedAt: instant(),
  },
})
export type Receipt = InferEntity<typeof Receipt>
