import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce, real } from './column'
import { ScaleCard } from './ScaleCard'
import { Submission } from './Submission'
import { Upload } from './Upload'
import { User } from './User'

export const photoStates = ['taken', 'being-measured', 'cannot-use', 'measured', 'reviewed'] as const

/** A photo as evidence. The original bytes stay as they were; what others see is re-encoded, turned upright, without location. */
export const Photo = defineEntity({
  name: 'Photo',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    upload: () => p.oneToOne(Upload).ref().owner().unique(),
    view: p.string().length(20),
    cylinder: p.integer().nullable(),
    side: p.enum(['intake', 'exhaust'] as const).nullable(),
    /** Spot the want names ("thinnest", "12-6"), when it names one. */
    spot: p.string().length(80).nullable(),
    card: () => p.manyToOne(ScaleCard).ref().nullable(),
    seatDepth: jsonOnce<{ value: string, unit: string, instrument: string }>().nullable(),
    clockMark: real().nullable(),
    state: p.enum([...photoStates]).default('taken'),
    /** One line that says what to do, when it cannot be used. */
    problem: p.text().nullable(),
    width: p.integer().nullable(),
    height: p.integer().nullable(),
    thumbKey: p.string().length(200).nullable(),
    previewKey: p.string().length(200).nullable(),
    addedBy: () => p.manyToOne(User).ref(),
    takenAt: instant(),
    setAsideAt: instant().nullable(),
  },
  indexes: [{ properties: ['submission'] }],
})
export type Photo = InferEntity<typeof Photo>
