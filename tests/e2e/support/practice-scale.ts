import type { Locator, Page } from 'playwright-core'

/** Sets a loose mix up on the simulated scale and stirs: the page then waits for the first gram. */
export async function setUpOnPracticeScale(page: Page, mixName: string, areaM2: string): Promise<void> {
  await page.getByRole('button', { name: 'Loose mix, no job' }).click()
  await page.getByLabel('What is it for').fill('Practice panels')
  await page.getByLabel('Material', { exact: true }).selectOption({ label: mixName })
  await page.getByLabel('Panel area', { exact: true }).last().fill(areaM2)
  await page.getByLabel('Wet coat weight', { exact: true }).fill('120')
  const scales = page.getByLabel('Scale', { exact: true })
  const [practice] = await scales.locator('option').filter({ hasText: 'Practice scale' }).allInnerTexts()
  if (practice === undefined) throw new Error('the demo shop has no practice scale')
  await scales.selectOption({ label: practice })
  await page.getByRole('button', { name: /^Start (this pot|pot 1)/ }).click()
  await page.getByRole('button', { name: /^It is stirred/ }).click()
  await hands(page).waitFor()
}

/** What works the simulated scale. */
export const hands = (page: Page): Locator => page.getByRole('group', { name: 'Simulated scale' })
export const hand = (page: Page, name: string): Promise<void> => hands(page).getByRole('button', { name: new RegExp(`^${name}`) }).click()

/** Grams that the scale shows. */
export const shown = async (page: Page): Promise<number> => Number((await page.getByLabel('Grams on the scale').innerText()).replace(/[^\d.-]/g, ''))

/** Lets material run in until the scale shows so much; the page itself closes the tin, so that a slow test does not pour on. */
export async function runIn(page: Page, flow: 'Pour' | 'Thin stream' | 'Drops', untilG: number): Promise<void> {
  await hand(page, flow)
  await page.evaluate((until) => new Promise<void>((resolve) => {
    const grams = (): number => Number((document.querySelector('output[aria-label="Grams on the scale"]')?.textContent ?? '').replace(/[^\d.-]/g, ''))
    const tin = [...document.querySelectorAll<HTMLButtonElement>('[aria-label="Simulated scale"] button')].find((button) => button.textContent?.startsWith('Close'))
    const look = (): void => {
      if (grams() < until) return
      watcher.disconnect()
      tin?.click()
      resolve()
    }
    const watcher = new MutationObserver(look)
    watcher.observe(document.body, { subtree: true, childList: true, characterData: true })
    look()
  }), untilG)
}

/** Pours so much in two goes, as a hand does, and waits until the scale stands still on it. */
export async function pourOnScale(page: Page, targetG: number): Promise<void> {
  if (targetG > 100) await runIn(page, 'Pour', targetG - 40)
  await runIn(page, 'Thin stream', targetG - 1.5)
}
