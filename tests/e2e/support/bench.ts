import type { Knex } from 'knex'
import type { Page } from 'playwright-core'
import { pointer, type Hand } from './hand'

/** Grams as a screen prints them, as the keypad takes them: the first number, without thin spaces. */
const gramsIn = (text: string): string => (/[\d\u2009\u202f ]+(?:\.\d+)?/.exec(text)?.[0] ?? '').replace(/[^\d.]/g, '')

/**
 * A polyurethane mix of the shop whose life is neither very short nor very long and that needs no standing time: one that
 * came with the shop, whatever other tests have made.
 */
export async function reactingMix(admin: Knex): Promise<{ name: string; potLifeMin: number }> {
  const row = await admin('mixes as m')
    .join('mix_revisions as r', 'r.id', 'm.current_revision_id')
    .join('mix_components as c', 'c.mix_revision_id', 'r.id')
    .join('materials as t', 't.id', 'c.material_id')
    .where({ 't.chemistry': 'polyurethane', 'c.role': 'base', 'r.induction_min': 0 })
    .whereBetween('r.pot_life_min', [90, 480])
    .orderBy([{ column: 'm.created_at' }, { column: 'm.code' }])
    .first<{ name: string; pot_life_min: string } | undefined>('m.name', 'r.pot_life_min')
  if (!row) throw new Error('the demo shop has no polyurethane mix for this test')
  return { name: row.name, potLifeMin: Number(row.pot_life_min) }
}

/** Sets a loose mix up and stirs: the page then waits for the first weight. */
export async function setUpLooseMix(page: Page, mixName: string, areaM2: string, hand: Hand = pointer): Promise<void> {
  await hand.press(page.getByRole('button', { name: 'Loose mix, no job' }))
  await hand.fill(page.getByLabel('What is it for'), 'Browser test panels')
  await hand.choose(page.getByLabel('Material', { exact: true }), mixName)
  await hand.fill(page.getByLabel('Panel area', { exact: true }).last(), areaM2)
  await hand.fill(page.getByLabel('Wet coat weight', { exact: true }), '120')
  await hand.press(page.getByRole('button', { name: /^Start (this pot|pot 1)/ }))
  await hand.press(page.getByRole('button', { name: /^It is stirred/ }))
  await page.getByRole('region', { name: 'Pour' }).waitFor()
}

/** Waits until the bench says that it can mix without a network. */
export async function untilReadyForOffline(page: Page): Promise<void> {
  await page.getByRole('banner').locator('button[aria-haspopup=dialog]').last().click()
  await page.getByRole('dialog').getByText('This tablet can mix without the network.').waitFor()
  await page.getByRole('dialog').getByRole('button', { name: 'Go on' }).click()
  await page.getByRole('dialog').waitFor({ state: 'hidden' })
}

/** The code that the server gave to the pot at hand, once it has come. */
export async function codeOf(page: Page): Promise<string> {
  const code = /B-\d{4,}/
  await page.getByRole('main').filter({ hasText: code }).waitFor()
  return code.exec(await page.getByRole('main').innerText())?.[0] ?? ''
}

/** Confirms what has to be worn, one tap a thing, where a sheet asks. The pour is locked until then, and the sheet may take a moment. */
export async function putOnWhatIsAsked(page: Page, hand: Hand = pointer): Promise<void> {
  const asked = page.getByRole('dialog').getByRole('button', { pressed: false })
  const typed = page.getByLabel(/^Grams of .* on the scale/).and(page.locator(':enabled'))
  const simulated = page.getByRole('group', { name: 'Simulated scale' }).getByRole('button', { name: /^Pour/, disabled: false })
  await asked.or(typed).or(simulated).first().waitFor()
  while (await asked.count() > 0) await hand.press(asked.first())
}

/** Types a weight as the scale would say it and takes it as settled. */
export async function weigh(page: Page, grams: string, hand: Hand = pointer): Promise<void> {
  const reading = page.getByLabel(/^Grams of .* on the scale/)
  await hand.fill(reading, grams)
  await reading.press('Enter')
}

/** The target of the component at hand. */
export const targetOf = async (page: Page): Promise<string> => gramsIn(await page.getByRole('region', { name: 'Pour', exact: true }).getByRole('button', { name: /show the sum: Target of/ }).innerText())

const standing = (page: Page) => page.getByRole('region', { name: 'Stir and stand' })

/** Goes on to what comes next, and waits until it is there; the button wakes when the weight is in tolerance. */
export async function next(page: Page, hand: Hand = pointer): Promise<void> {
  const heading = page.getByRole('region', { name: 'Pour', exact: true }).getByRole('heading', { level: 1 })
  const poured = await heading.innerText()
  await hand.press(page.getByRole('button', { name: /^Next component/ }))
  await standing(page).or(heading.filter({ hasNotText: poured })).or(page.getByRole('dialog')).first().waitFor()
}

/** Pours every component to its target, as it follows the base. Returns what was typed. */
export async function pourToTargets(page: Page, hand: Hand = pointer): Promise<string[]> {
  const typed: string[] = []
  while (!await standing(page).isVisible()) {
    await putOnWhatIsAsked(page, hand)
    const grams = await targetOf(page)
    await weigh(page, grams, hand)
    typed.push(grams)
    await next(page, hand)
  }
  return typed
}

/** Stirs, labels and logs; returns the code on the label. */
export async function labelAndLog(page: Page, hand: Hand = pointer): Promise<string> {
  await hand.press(page.getByRole('button', { name: 'It is stirred and scraped' }))
  await hand.press(page.getByRole('button', { name: /^Next: label/ }))
  await page.getByRole('heading', { name: 'Put this on the cup' }).waitFor()
  await hand.press(page.getByRole('button', { name: /^Label is on the cup/ }))
  const logged = page.getByRole('heading', { name: /^B-\d{4,} is in the log$/ })
  await logged.waitFor()
  return (await logged.innerText()).split(' ')[0] ?? ''
}

/** First and last piece of a pot, as the set-up lists them. */
interface PieceSpan { from: number; to: number }

/** Coats of one pass that the form takes. */
const MOST_COATS = 6

/**
 * Picks a planned coat, and a cup and coats with which it goes into so many pots. The set-up then stands ready to start.
 *
 * @param mixNames mixes that the test can make
 * @returns the pieces of each pot, in order
 */
export async function planInPots(page: Page, count: number, mixNames: readonly string[]): Promise<PieceSpan[]> {
  const list = page.getByRole('region', { name: 'Today\'s list' })
  const rows = list.getByRole('button', { name: /Ready/ })
  await rows.first().waitFor()
  const cups = page.getByLabel('Cup', { exact: true })
  const start = page.getByRole('button', { name: new RegExp(`^Start pot 1 of ${count}:`), disabled: false })
  for (const row of await rows.all()) {
    await row.click()
    const material = await page.getByLabel('Material', { exact: true }).evaluate((select) => (select as HTMLSelectElement).selectedOptions[0]?.label.trim() ?? '')
    if (!mixNames.includes(material)) continue
    for (let coats = 1; coats <= MOST_COATS; coats++) {
      for (const cup of await cups.locator('option').evaluateAll((options) => options.map((option) => (option as HTMLOptionElement).value))) {
        await cups.selectOption(cup)
        if (await start.count() > 0) return spansOf(page)
      }
      const more = page.getByRole('button', { name: 'Coats: one more' })
      if (await more.isDisabled()) break
      await more.click()
    }
  }
  throw new Error(`no planned coat of the demo shop goes into ${count} pots`)
}

async function spansOf(page: Page): Promise<PieceSpan[]> {
  const lines = await page.getByRole('region', { name: 'This pot' }).getByRole('listitem').filter({ hasText: /^pot \d+: pieces/ }).allInnerTexts()
  return lines.map((line) => {
    const [, from, to] = /pieces (\d+) to (\d+)/.exec(line) ?? []
    return { from: Number(from), to: Number(to) }
  })
}
