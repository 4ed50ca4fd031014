import { readFileSync } from 'node:fs'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import type { SheetView } from '#shared/contract/views'
import { expectedSheets } from '../../fixtures/sheets/read-fixture'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Answer, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { sendFile } from '../uploads/send-file'
import { clearFor, walkTo } from '../walk'

export type SheetAnswer = Answer<SheetView & { code: string, title: string, issues: { path: string, code: string, message: string }[] }>

/** A school whose Imre has a head at op 100, Flow after bowl, and may put sheets in. */
export interface SheetBench {
  harness: Harness
  school: TestSchool
  api: Api
  imre: Caller
  /** A draft of a head nothing was flowed on yet. */
  freshDraft: (number: string) => Promise<string>
  /** Sends a file to storage as a flow sheet. */
  upload: (body: string | Uint8Array, filename?: string, who?: Caller) => Promise<string>
  /** Puts an upload into a submission. */
  put: (submissionId: string, input: { uploadId: string } & Record<string, unknown>, who?: Caller, key?: string) => Promise<SheetAnswer>
  /** Both at once. */
  send: (submissionId: string, body: string | Uint8Array, filename?: string) => Promise<SheetAnswer>
  close: () => Promise<void>
}

export async function openSheetBench(): Promise<SheetBench> {
  const harness = await openHarness()
  const school = await makeSchool(harness)
  const api = await serveApi(harness)
  const imre = await api.as(school.imre)
  await clearFor(school, school.imre)

  async function upload(body: string | Uint8Array, filename = 'bench.csv', who = imre): Promise<string> {
    const { id, complete } = await sendFile(who, Buffer.from(body), { purpose: 'flow-sheet', filename, contentType: filename.endsWith('.xlsx') ? 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet' : 'text/csv' })
    if (complete.status !== 200) throw new Error(`upload of ${filename}: ${JSON.stringify(complete.body)}`)
    return id
  }
  const put: SheetBench['put'] = (submissionId, input, who = imre, key = undefined) => who.post(`/api/submissions/${submissionId}/flow-sheets`, input, key)
  return {
    harness, school, api, imre, upload, put,
    send: async (submissionId, body, filename) => put(submissionId, { uploadId: await upload(body, filename) }),
    async freshDraft(number) {
      const headId = await school.anotherHead(number)
      await walkTo(school, 100, headId)
      return school.em().transactional(async (tx) => {
        const made = tx.create(Submission, {
          head: tx.getReference(PracticeHead, headId), op: 100, part: 'rest', point: 'hold-5', tryNumber: 1, version: 1, ports: [{ cylinder: 1, side: 'intake' }, { cylinder: 1, side: 'exhaust' }], startedBy: tx.getReference(User, school.imre.id),
          createdAt: school.now(), askedAt: null, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null,
        })
        tx.persist(made)
        return made.id
      })
    },
    async close() {
      await api.close()
      await harness.close()
    },
  }
}

/** The file of one of the school's practice sheets. */
export function practiceFile(number: string): { name: string, body: Buffer } {
  const name = expectedSheets()[number]?.file
  if (!name) throw new Error(`no sheet ${number}`)
  return { name, body: readFileSync(new URL(`../../fixtures/sheets/${name}`, import.meta.url)) }
}
