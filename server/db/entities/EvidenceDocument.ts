import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { Submission } from './Submission'
import { Upload } from './Upload'
import { User } from './User'

/** A document as evidence: damage list, signed caution card, route card. */
export const EvidenceDocument = defineEntity({
  name: 'EvidenceDocument',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    upload: () => p.oneToOne(Upload).ref().owner().unique(),
    note: p.string().length(200).default(''),
    addedBy: () => p.manyToOne(User).ref(),
    addedAt: instant(),
    setAsideAt: instant().nullable(),
  },
  indexes: [{ properties: ['submission'] }],
})
export type EvidenceDocument = InferEntity<typeof EvidenceDocument>
