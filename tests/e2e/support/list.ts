import type { Locator, Page } from 'playwright-core'
import { alive, baseUrl } from './browser'

/** Opens the log and shows its next, older page of rows. Returns the rows and how many there were at first. */
export async function logWithOlderRows(page: Page): Promise<{ rows: Locator, first: number }> {
  await page.goto(`${baseUrl}/batches`)
  await alive(page)
  const rows = page.locator('tr[data-row]')
  const first = await rows.count()
  await page.getByRole('button', { name: 'Show older batches' }).click()
  await rows.nth(first).waitFor()
  return { rows, first }
}
