import { createHash, randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { addFlowSheet } from '#server/services/flow-sheets/add-flow-sheet'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { decodeSheetBytes } from '#shared/domain/airflow/sheet/decode-sheet-bytes'
import { readFlowSheet } from '#shared/domain/airflow/sheet/read-flow-sheet'
import { splitDelimitedText } from '#shared/domain/airflow/sheet/split-delimited-text'
import { generatedSheet } from './generated-sheet'
import type { StoryCard } from './iron'
import type { StoryHead, StorySheet } from './story-parts'

/** One of the school's practice sheets, byte for byte. */
export function practiceSheet(file: string): Buffer {
  return readFileSync(new URL(`../../content/sheets/${file}`, import.meta.url))
}

/** Puts a sheet into storage as an upload that is there already, and through the same reading as the Sheet reader's. */
export async function handInSheet(em: EntityManager, app: App, actor: Actor, submissionId: string, file: { filename: string, body: Buffer }): Promise<void> {
  const at = app.clock.schoolNow()
  const key = `flow-sheet/${randomBytes(24).toString('base64url')}`
  await app.storage.put({ key, body: file.body, contentType: 'text/plain' })
  const uploadId = await em.transactional(async (tx) => {
    const upload = tx.create(Upload, {
      owner: tx.getReference(User, actor.id), purpose: 'flow-sheet', key, filename: file.filename, bytes: file.body.length, contentType: 'text/plain', sha256: createHash('sha256').update(file.body).digest('hex'),
      multipartId: null, detectedType: 'text/plain', state: 'received', createdAt: at, receivedAt: at, usedAt: null, usedBy: null,
    })
    tx.persist(upload)
    return upload.id
  })
  await addFlowSheet(em, app, actor, submissionId, { uploadId })
}

/** The file of a sheet of the story, generated where the school has none. */
export function sheetFile(card: StoryCard, head: StoryHead, sheet: StorySheet): { filename: string, body: Buffer } {
  if ('file' in sheet) return { filename: sheet.file, body: practiceSheet(sheet.file) }
  const [first = '', ...rest] = head.student.split(' ')
  return generatedSheet(card, {
    head: head.number, operator: `${first.charAt(0)}. ${rest.join(' ')}`, bench: head.bench, date: sheet.date, cylinder: sheet.cylinder, side: sheet.side, stage: sheet.generated, run: sheet.run ?? 1,
    entry: sheet.side === 'intake' ? head.entry : 'Bench bore 84 mm adapter', pipe: sheet.side === 'intake' ? 'n/a' : head.pipe,
    ...(sheet.like === undefined ? {} : { points: pointsOf(sheet.like, card) }),
  })
}

function pointsOf(file: string, card: StoryCard) {
  const read = readFlowSheet(splitDelimitedText(decodeSheetBytes(practiceSheet(file))), { casting: card })
  const [run] = read.runs
  if (!run) throw new Error(`${file} has no run to repeat`)
  return run.points
}
