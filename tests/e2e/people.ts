import type { Page } from '@playwright/test'
import type { HeadSummary, Page as PageOf } from '#shared/contract/views'
import { read } from './calls'

/** Students of the cohort that works now whose head stands at a stage, by first name, as an instructor sees them. */
export async function studentsAt(instructor: Page, op: number, cohort = 'ALD-26'): Promise<string[]> {
  const names: string[] = []
  let after = ''
  for (;;) {
    const page = await read<PageOf<HeadSummary>>(instructor, `/api/heads?limit=50${after}`)
    for (const head of page.items) if (head.stageNow?.op === op && head.cohort?.code === cohort && head.state !== 'scrapped') names.push(head.student.name.split(' ')[0] ?? '')
    if (!page.next) return [...new Set(names)]
    after = `&after=${encodeURIComponent(page.next)}`
  }
}

/** Follows a submission until the program has scored it. */
export async function scored(page: Page, id: string): Promise<void> {
  const until = Date.now() + 20_000
  for (;;) {
    const { state } = await read<{ state: string }>(page, `/api/submissions/${id}`)
    if (state === 'scored') return
    if (Date.now() > until) throw new Error(`submission ${id} is ${state} after twenty seconds`)
    await page.waitForTimeout(100)
  }
}
