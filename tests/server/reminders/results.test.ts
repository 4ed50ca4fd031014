import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Mail } from '#server/db/entities/Mail'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { writeResults } from '#server/services/reminders/write-results'
import type { Actor } from '#server/utils/actor'
import { openSheetBench, practiceFile, type SheetBench } from '../flow-sheets/sheet-bench'
import { clearFor, walkTo } from '../walk'

let bench: SheetBench
beforeAll(async () => {
  bench = await openSheetBench()
})
afterAll(() => bench?.close())
const em = () => bench.school.em()

async function placeOf(who: Actor, slot: number): Promise<BenchPlace> {
  return em().transactional(async (tx) => {
    const made = tx.create(BenchPlace, { cohort: tx.getReference(Cohort, bench.school.cohortId), person: tx.getReference(User, who.id), name: who.name, email: who.email, state: 'here', slot, createdAt: bench.school.now() })
    tx.persist(made)
    return made
  })
}
const write = (place: BenchPlace) => em().transactional(async tx => writeResults(tx, bench.harness.app, await tx.findOneOrFail(BenchPlace, place.id)))
const mailOf = (place: BenchPlace) => em().findOne(Mail, { key: `results:${place.id}` })

async function draftAt(headId: string, op: number, point: string): Promise<string> {
  return em().transactional(async (tx) => {
    const made = tx.create(Submission, {
      head: tx.getReference(PracticeHead, headId), op, part: 'rest', point, tryNumber: 1, version: 1, ports: [{ cylinder: 1, side: 'intake' }], startedBy: tx.getReference(User, bench.school.imre.id), createdAt: bench.school.now(),
      askedAt: null, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null,
    })
    tx.persist(made)
    return made.id
  })
}

it('tells the word, the score, the gain with its doubt, what was done well and what to work on, once', async () => {
  const { school } = bench
  const imre = school.imre
  const place = await placeOf(imre, 1)
  const headId = await school.anotherHead('DNK-0501', imre)
  await walkTo(school, 30, headId)
  const baseline = practiceFile('01')
  expect(await bench.send(await draftAt(headId, 30, 'hold-2'), baseline.body, baseline.name)).toMatchObject({ status: 201 })
  await walkTo(school, 100, headId, 30)
  const bowl = practiceFile('03')
  expect(await bench.send(await draftAt(headId, 100, 'hold-5'), bowl.body, bowl.name)).toMatchObject({ status: 201 })
  await school.scored({ op: 110, head: headId, changes: [{ criterion: 'P-03', state: 'borderline', text: 'Keep the roof straight.' }] })

  expect(await write(place)).toBe(true)
  expect(await write(place)).toBe(true)
  const mail = await mailOf(place)
  // Musts of other stages were never looked at here.
  expect(mail).toMatchObject({ template: 'results', subject: 'Your result: not yet', to: imre.email, person: { id: imre.id } })
  expect(mail?.text).toContain('Imre, DNK-0501: not yet, ')
  // Handbook 8.6: Imre's lift-weighted flow went from 73.6 to 78.9 cfm after the bowl, +7.2 %.
  expect(mail?.text).toMatch(/Lift-weighted intake 7\.2\d? ± \d\.\d+ %\./)
  expect(mail?.text).toContain('Three things you do well:')
  expect(mail?.text).toMatch(/One to work on: .+\. Keep the roof straight\./)
  expect(mail?.text).toContain(`Certificate and full record:\n${bench.harness.app.config.publicUrl}/my-record`)
  expect(await em().count(Mail, { template: 'results' })).toBe(1)
})

it('speaks of no gain without curves, and of the core that was not lost', async () => {
  const { school } = bench
  const dele = await school.person('Dele Marchbank', ['student'])
  await clearFor(school, dele)
  const place = await placeOf(dele, 2)
  const lost = await school.anotherHead('DNK-0166', dele)
  const kept = await school.anotherHead('DNK-0171', dele)
  await em().nativeUpdate(PracticeHead, lost, { state: 'sawn', receivedAt: new Date() })
  await school.scored({ op: 110, head: kept })
  expect(await write(place)).toBe(true)
  const mail = await mailOf(place)
  expect(mail?.text).toContain('Dele, DNK-0171: ')
  expect(mail?.text).not.toContain('Lift-weighted')
  expect(mail?.text).not.toContain('One to work on')
})

it('writes nothing of somebody who never had a head', async () => {
  const wen = await bench.school.person('Wen Sallis', ['student'])
  const place = await placeOf(wen, 3)
  expect(await write(place)).toBe(false)
  expect(await mailOf(place)).toBe(null)
})
