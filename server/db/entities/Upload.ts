import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant } from './column'
import { User } from './User'

export const uploadPurposes = ['photo', 'flow-sheet', 'document', 'lesson-media'] as const
export type UploadPurpose = (typeof uploadPurposes)[number]

/** A file on its way to storage, or there. It belongs to its maker, and is used once and only for its purpose. */
export const Upload = defineEntity({
  name: 'Upload',
  properties: {
    id: id(),
    owner: () => p.manyToOne(User).ref(),
    purpose: p.enum([...uploadPurposes]),
    /** Random; chosen by the server; never shows the file's name. */
    key: p.string().length(200).unique(),
    filename: p.string().length(255),
    bytes: p.bigint('number'),
    contentType: p.string().length(120),
    /** Hex, as told; checked against what storage holds. */
    sha256: p.string().length(64),
    /** Storage's id of a multipart upload; null when sent in one piece. */
    multipartId: p.text().nullable(),
    /** Type as detected from its bytes; null until received. */
    detectedType: p.string().length(120).nullable(),
    state: p.enum(['open', 'received', 'used', 'refused'] as const).default('open'),
    createdAt: instant(),
    receivedAt: instant().nullable(),
    usedAt: instant().nullable(),
    /** "photo:<id>", "flow-sheet:<id>", "document:<id>". */
    usedBy: p.string().length(80).nullable(),
  },
  indexes: [{ properties: ['owner', 'state'] }, { properties: ['sha256'] }, { properties: ['state', 'createdAt'] }],
})
export type Upload = InferEntity<typeof Upload>
