import { median } from '../../shared/domain/uncertainty/median'
import { Problem } from '../lib/problem'
import { basePath, type PageToVisit } from './pages-to-visit'
import type { Visitor } from './visitor'

export interface PageTime { page: PageToVisit, ms: number, ratio: number }

const rounds = 30
const warmUps = 5

/**
 * How long the server takes for each page, as medians and over the base page of the same person. Visits are taken in turn, one at
 * a time, so that whatever else the machine does falls on all of them alike.
 *
 * @returns times in ms
 * @throws {Problem} when a page does not answer 200
 */
export async function pageTimes(url: string, pages: readonly PageToVisit[]): Promise<{ baseMs: number, times: PageTime[] }> {
  const visitors = [...new Set(pages.map(page => page.visitor))]
  const visits = [...visitors.map(visitor => ({ visitor, path: basePath })), ...pages.map(({ visitor, path }) => ({ visitor, path }))].map(visit => ({ ...visit, taken: [] as number[] }))
  for (let round = 0; round < warmUps + rounds; round++) {
    for (const visit of visits) {
      const ms = await timeOf(url, visit.visitor, visit.path)
      if (round >= warmUps) visit.taken.push(ms)
    }
  }
  const baseOf = (visitor: Visitor) => median(visits.find(visit => visit.visitor === visitor && visit.path === basePath)?.taken ?? [])
  return {
    baseMs: median(visits.filter(visit => visit.path === basePath).flatMap(visit => visit.taken)),
    times: pages.map((page, index) => {
      const ms = median(visits[visitors.length + index]?.taken ?? [])
      return { page, ms, ratio: ms / baseOf(page.visitor) }
    }),
  }
}

async function timeOf(url: string, visitor: Visitor, path: string): Promise<number> {
  const began = performance.now()
  const answer = await fetch(`${url}${path}`, { redirect: 'manual', headers: { cookie: visitor.cookie, accept: 'text/html' } })
  await answer.text()
  if (answer.status !== 200) throw new Problem(`${path} answered ${answer.status} to ${visitor.name}.`)
  return performance.now() - began
}
