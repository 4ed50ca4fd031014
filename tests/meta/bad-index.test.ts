import { existsSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { projectRoot } from '../../scripts/lib/project-root'
import { refusals } from '../../shared/contract/refusals'
import { testNames } from './test-names'

interface BadCase { name: string, what: string, expect: { status: number, code?: string }, test: string }

const cases = JSON.parse(readFileSync(join(projectRoot, 'tests/fixtures/bad/index.json'), 'utf8')) as BadCase[]

/** What this version must be tried with, each by the entries that do. */
const mustHave: Readonly<Record<string, readonly string[]>> = {
  'a wrong or huge file behind a right name': ['upload-picture-named-csv', 'upload-html-named-csv', 'upload-too-large'],
  'a PDF named .jpg': ['upload-pdf-named-jpg'],
  'a spreadsheet that unpacks to a bomb': ['sheet-zip-bomb'],
  'a picture of 30,000 x 30,000 pixels': ['photo-30000-pixels'],
  'a sheet without a unit': ['sheet-no-unit'],
  '1,2,3': ['reading-two-commas'],
  'NaN': ['reading-nan', 'reading-station-nan', 'review-nan', 'compute-nan', 'upload-bytes-nan'],
  '1e999': ['reading-1e999', 'reading-station-1e999', 'review-1e999', 'compute-1e999'],
  '41 in inches': ['reading-41-inches'],
  '1,234': ['reading-ambiguous'],
  'NUL in text': ['reading-nul', 'ask-nul', 'review-nul', 'sheet-nul', 'upload-name-nul', 'rubric-nul', 'queue-nul', 'invitation-nul'],
  'lone surrogates in text': ['reading-lone-surrogate', 'ask-lone-surrogate', 'review-lone-surrogate', 'upload-name-lone-surrogate'],
  'ids that are no UUIDs': ['submission-id-no-uuid', 'upload-id-no-uuid', 'review-unknown-id', 'sheet-unknown-id'],
  'cylinder 9': ['reading-cylinder-9', 'photo-cylinder-9', 'sheet-cylinder-9', 'draft-cylinder-9', 'review-cylinder-9'],
  'side "left"': ['reading-side-left', 'photo-side-left', 'draft-side-left', 'review-side-left'],
  'another student\'s ids and uploads': ['submission-other-students', 'reading-other-students', 'upload-other-students', 'photo-other-students-upload', 'sheet-other-persons'],
  'an upload of the wrong purpose or used already': ['photo-wrong-purpose', 'photo-upload-used', 'sheet-wrong-purpose', 'sheet-used'],
  'a pin on a foreign photo': ['pin-foreign-photo'],
  'an override outside the stage': ['override-outside-stage'],
  'a reading after Ask': ['reading-after-ask'],
  'a reading after the decision': ['evidence-after-decision'],
  'a stage that is not open': ['stage-not-open', 'second-bowl-before-hold-4'],
  'a clearance that lapses in the middle of a draft': ['clearance-lapses-mid-draft'],
  'a double Ask': ['double-ask'],
  'one Idempotency-Key with another body': ['ask-key-other-body', 'reading-key-other-body', 'upload-key-other-body', 'review-key-other-body'],
  'two tabs': ['two-tabs'],
  'a session that ends with a full queue': ['session-ended-with-full-queue'],
  'drafts of two people on one tablet': ['outbox-shared-tablet', 'pad-shared-tablet'],
  'a role removed while events stream': ['role-removed-while-streaming'],
  'a review of one\'s own work': ['review-own-work'],
  'a stale review': ['review-stale'],
  'a list of people with duplicates and formula cells': ['roster-rows'],
  'two admins moving the last place': ['place-move-last'],
  'eight invented addresses trying to hold every place': ['place-ask-invented'],
}

it('has every case once', () => {
  expect(cases.map(one => one.name)).toEqual([...new Set(cases.map(one => one.name))])
  for (const one of cases) expect(one.what, one.name).toMatch(/\w/)
})

it.each(Object.entries(mustHave))('tries %s', (_, names) => {
  expect(names.filter(name => !cases.some(one => one.name === name))).toEqual([])
})

const fileOf = (one: BadCase) => one.test.split(' :: ')[0] ?? ''

it.each([...new Set(cases.map(fileOf))])('finds every test that is listed for %s, and its answers in the table of refusals', (file) => {
  expect(existsSync(join(projectRoot, file)), file).toBe(true)
  const names = testNames(join(projectRoot, file))
  const text = readFileSync(join(projectRoot, file), 'utf8')
  for (const { name, test, expect: { status, code } } of cases.filter(one => fileOf(one) === file)) {
    expect(names, name).toContain(test.slice(file.length + 4))
    // What a person does in a browser is held to what the page shows.
    if (code && file.startsWith('tests/server/')) expect(text, `${name} in ${file}`).toContain(`'${code}'`)
    if (code && status >= 400) expect(refusals[code as keyof typeof refusals]?.[0], `${name}: ${code}`).toBe(status)
  }
})
