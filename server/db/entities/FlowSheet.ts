import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { FlowRun, SheetHeader } from '../../../shared/domain/airflow/flow-run'
import { id, instant, jsonOnce } from './column'
import { Submission } from './Submission'
import { Upload } from './Upload'
import { User } from './User'

/** A flow sheet: the raw file for ever, and the newest reading of it. Each reading is kept as a `FlowSheetReading`. */
export const FlowSheet = defineEntity({
  name: 'FlowSheet',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    upload: () => p.oneToOne(Upload).ref().owner().unique(),
    state: p.enum(['raw', 'read', 'asked', 'used', 'set-aside'] as const).default('raw'),
    addedBy: () => p.manyToOne(User).ref(),
    addedAt: instant(),
  },
  indexes: [{ properties: ['submission'] }],
})
export type FlowSheet = InferEntity<typeof FlowSheet>

export interface SheetFinding { code: string, severity: 'note' | 'ask' | 'refuse', lifts: number[], text: string }
export interface SheetNeed { field: string, question: string, choices?: string[] }
export interface SheetColumn { heading: string, meaning: string | null, unit: string | null, from: string }

/** One reading of a flow sheet, by one method with one set of answers. Never changed. */
export const FlowSheetReading = defineEntity({
  name: 'FlowSheetReading',
  properties: {
    id: id(),
    sheet: () => p.manyToOne(FlowSheet).ref(),
    version: p.integer(),
    kind: p.enum(['flow', 'plate-log'] as const),
    bench: p.string().length(60).nullable(),
    header: jsonOnce<SheetHeader>(),
    runs: jsonOnce<FlowRun[]>(),
    columns: jsonOnce<SheetColumn[]>(),
    firstRows: jsonOnce<string[][]>(),
    findings: jsonOnce<SheetFinding[]>(),
    needs: jsonOnce<SheetNeed[]>(),
    plateLog: jsonOnce<unknown>().nullable(),
    answers: jsonOnce<Record<string, string>>(),
    method: p.string().length(40),
    readAt: instant(),
  },
  uniques: [{ properties: ['sheet', 'version'] }],
})
export type FlowSheetReading = InferEntity<typeof FlowSheetReading>
