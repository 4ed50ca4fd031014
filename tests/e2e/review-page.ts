import type { Locator, Page } from '@playwright/test'
import { expect, ready } from './walk'

/** The line of a criterion on the limits sheet. */
export const criterion = (page: Page, id: string): Locator => page.locator(`[data-criterion="${id}"]`)

/** Opens a student's submission from the review queue, the way an instructor comes to it. */
export async function openReview(page: Page, student: string): Promise<void> {
  await page.goto('/review')
  await ready(page)
  await page.getByRole('listitem').getByRole('link', { name: new RegExp(student) }).first().click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText(student)
  await expect(page.getByRole('button', { name: /^(Release|Accept)/ })).toBeVisible()
}

/** Gives the state of a criterion that only a person can judge. */
export async function judge(page: Page, id: string, state: 'Accept' | 'Borderline' | 'Reject', reason: string): Promise<void> {
  const line = criterion(page, id)
  await line.getByRole('button', { name: 'Give a state' }).first().click()
  await line.getByRole('radio', { name: state }).check()
  await line.getByLabel(/Reason/).fill(reason)
  await line.getByRole('button', { name: 'Keep' }).click()
  await expect(line.getByText(`yours: ${reason}`)).toBeVisible()
}
