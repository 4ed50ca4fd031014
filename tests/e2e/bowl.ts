import type { Page } from '@playwright/test'
import type { BenchView, SubmissionView, WantedView } from '#shared/contract/views'
import { must, read, upload } from './calls'
import { takePicture } from './picture'

/** What a careful first bowl reads at each spot: inside every band of op 70 (content/school/rubric.json), in mm. */
const good: Readonly<Record<string, { value: string, instrument: string }>> = {
  'seat-land': { value: '1.65', instrument: 'loupe' },
  'throat-diameter': { value: '36.40', instrument: 'split-ball' },
  'wall-thickness': { value: '5.1', instrument: 'wall-gauge' },
  'mean-radial-cut': { value: '1.45', instrument: 'caliper' },
  'under-seat-radius': { value: '7.0', instrument: 'mould-radius' },
}

/** What a test's bowl differs by: another figure at a spot, or a quantity nobody read. */
export interface BowlChange { quantity: string, spot?: string, value: string | null }

/**
 * Brings a part of op 70 with everything that is wanted but for the changes, by the routes the outbox uses.
 *
 * @returns the submission, still a draft
 */
export async function bringBowl(page: Page, changes: readonly BowlChange[] = [], photos = true): Promise<SubmissionView> {
  const bench = await read<BenchView>(page, '/api/bench')
  const { id } = await must<{ id: string }>(page, `/api/heads/${bench.head?.id}/stages/70/submissions`)
  const draft = await read<SubmissionView>(page, `/api/submissions/${id}`)
  const [port] = draft.ports
  for (const want of draft.wanted) {
    for (let have = want.have; have < want.count; have++) {
      if (want.kind === 'reading') await bringReading(page, draft.id, want, port ?? { cylinder: 1, side: 'intake' }, changes)
      if (want.kind === 'photo' && photos) {
        const { name, mimeType, buffer } = await takePicture(300)
        const uploadId = await upload(page, 'photo', name, mimeType, buffer)
        await must(page, `/api/submissions/${draft.id}/photos`, { uploadId, view: want.view, cylinder: want.cylinder, side: want.side, ...(want.spot ? { spot: want.spot } : {}) })
      }
    }
  }
  return read<SubmissionView>(page, `/api/submissions/${draft.id}`)
}

async function bringReading(page: Page, id: string, want: WantedView, port: { cylinder: number, side: string }, changes: readonly BowlChange[]): Promise<void> {
  const ultrasonic = want.spot?.includes('ultrasonic') ?? false
  const usual = good[want.quantity ?? '']
  if (!usual) throw new Error(`a bowl's ${want.quantity} is not known to the test`)
  const change = changes.find(one => one.quantity === want.quantity && (one.spot === undefined || one.spot === want.spot))
  if (change?.value === null) return
  await must(page, `/api/submissions/${id}/readings`, {
    quantity: want.quantity, values: [change?.value ?? usual.value], unit: 'mm', instrument: ultrasonic ? 'ultrasonic' : usual.instrument,
    // One of the walls again by another gauge: the want names no port of its own.
    cylinder: ultrasonic ? port.cylinder : want.cylinder, side: ultrasonic ? port.side : want.side,
    ...(ultrasonic ? { at: { spot: 'bowl, fore' } } : want.spot ? { at: { spot: want.spot } } : {}), ...(want.when ? { when: want.when } : {}),
  })
}
