import type { Knex } from 'knex'
import type { Page } from 'playwright-core'

/** Grams as a screen prints them, as the keypad takes them: the first number, without thin spaces. */
const gramsIn = (text: string): string => (/[\d\u2009\u202f ]+(?:\.\d+)?/.exec(text)?.[0] ?? '').replace(/[^\d.]/g, '')

/** A polyurethane mix of the shop whose life is neither very short nor very long and that needs no standing time. */
export async function reactingMix(admin: Knex): Promise<{ name: string; potLifeMin: number }> {
  const row = await admin('mixes as m')
    .join('mix_revisions as r', 'r.id', 'm.current_revision_id')
    .join('mix_components as c', 'c.mix_revision_id', 'r.id')
    .join('materials as t', 't.id', 'c.material_id')
    .where({ 't.chemistry': 'polyurethane', 'c.role': 'base', 'r.induction_min': 0 })
    .whereBetween('r.pot_life_min', [90, 480])
    .orderBy('m.code')
    .first<{ name: string; pot_life_min: string } | undefined>('m.name', 'r.pot_life_min')
  if (!row) throw new Error('the demo shop has no polyurethane mix for this test')
  return { name: row.name, potLifeMin: Number(row.pot_life_min) }
}

/** Sets a loose mix up and stirs: the page then waits for the first weight. */
export async function setUpLooseMix(page: Page, mixName: string, areaM2: string): Promise<void> {
  await page.getByRole('button', { name: 'Loose mix, no job' }).click()
  await page.getByLabel('What is it for').fill('Browser test panels')
  await page.getByLabel('Material', { exact: true }).selectOption({ label: mixName })
  await page.getByLabel('Panel area', { exact: true }).last().fill(areaM2)
  await page.getByLabel('Wet coat weight', { exact: true }).fill('120')
  await page.getByRole('button', { name: /^Start (this pot|pot 1)/ }).click()
  await page.getByRole('button', { name: /^It is stirred/ }).click()
  await page.getByRole('region', { name: 'Pour' }).waitFor()
}

/** The code that the server gave to the pot at hand, once it has come. */
export async function codeOf(page: Page): Promise<string> {
  const code = /B-\d{4,}/
  await page.getByRole('main').filter({ hasText: code }).waitFor()
  return code.exec(await page.getByRole('main').innerText())?.[0] ?? ''
}

/** Confirms what has to be worn, one tap a thing, where a sheet asks. */
export async function putOnWhatIsAsked(page: Page): Promise<void> {
  const asked = page.getByRole('dialog').getByRole('button', { pressed: false })
  while (await asked.count() > 0) await asked.first().click()
}

/** Types a weight as the scale would say it and takes it as settled. */
export async function weigh(page: Page, grams: string): Promise<void> {
  const reading = page.getByLabel(/^Grams of .* on the scale/)
  await reading.fill(grams)
  await reading.press('Enter')
}

/** The target of the component at hand. */
export const targetOf = async (page: Page): Promise<string> => gramsIn(await page.getByRole('region', { name: 'Pour', exact: true }).getByRole('button', { name: /show the sum: Target of/ }).innerText())

/** Goes on to what comes next; the button wakes when the weight is in tolerance. */
export const next = (page: Page): Promise<void> => page.getByRole('button', { name: /^Next component/ }).click()

/** Pours every component to its target, as it follows the base. Returns what was typed. */
export async function pourToTargets(page: Page): Promise<string[]> {
  const typed: string[] = []
  const standing = page.getByRole('region', { name: 'Stir and stand' })
  const heading = page.getByRole('region', { name: 'Pour', exact: true }).getByRole('heading', { level: 1 })
  while (!await standing.isVisible()) {
    await putOnWhatIsAsked(page)
    const poured = await heading.innerText()
    const grams = await targetOf(page)
    await weigh(page, grams)
    typed.push(grams)
    await next(page)
    await Promise.race([standing.waitFor(), heading.filter({ hasNotText: poured }).waitFor(), page.getByRole('dialog').waitFor()])
  }
  return typed
}

/** Stirs, labels and logs; returns the code on the label. */
export async function labelAndLog(page: Page): Promise<string> {
  await page.getByRole('button', { name: 'It is stirred and scraped' }).click()
  await page.getByRole('button', { name: /^Next: label/ }).click()
  await page.getByRole('heading', { name: 'Put this on the cup' }).waitFor()
  await page.getByRole('button', { name: /^Label is on the cup/ }).click()
  const logged = page.getByRole('heading', { name: /^B-\d{4,} is in the log$/ })
  await logged.waitFor()
  return (await logged.innerText()).split(' ')[0] ?? ''
}
