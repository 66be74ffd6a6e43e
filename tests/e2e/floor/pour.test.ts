import { afterAll, describe, expect, it } from 'vitest'
import { drawQr } from '~/utils/qr'
import { createKnex } from '../../../server/database/connection'
import { codeOf, labelAndLog, next, pourToTargets, putOnWhatIsAsked, reactingMix, setUpLooseMix, targetOf } from '../support/bench'
import { axeFaults, baseUrl, overflowsSideways } from '../support/browser'
import { hand, hands, pourOnScale, runIn, setUpOnPracticeScale, shown } from '../support/practice-scale'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

const poursOf = (code: string) => admin('batch_pours as p').join('batches as b', 'b.id', 'p.batch_id').where('b.code', code)
  .select<{ source: string, grams: string, round: number }[]>('p.source', 'p.grams', 'p.round')
const numberOf = (code: string) => Number(code.slice(2))
const isInLog = (code: string) => admin('batches').where({ code }).first<{ id: string } | undefined>('id')

describe('pouring on the simulated scale', () => {
  it('is marked as simulated, pauses while the cup is lifted, asks why it came back lighter, and goes on over a reload', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpOnPracticeScale(page, mix.name, '12')
    expect(await page.getByRole('banner').getByText('Simulated scale').isVisible()).toBe(true)
    expect(await hands(page).evaluate((group) => group.parentElement?.textContent)).toContain('nothing is weighed')
    const base = Number(await targetOf(page))
    await runIn(page, 'Pour', base / 2)
    const forward = page.getByRole('button', { name: /^Next component/ })

    await hand(page, 'Lift')
    await page.getByText('Cup lifted').first().waitFor()
    await page.getByText('The pour is paused.').waitFor()
    const before = await shown(page)
    expect(before).toBeGreaterThan(base / 2)
    expect(await forward.isDisabled()).toBe(true)
    expect(await axeFaults(page)).toEqual([])
    await hand(page, 'Put back')
    await page.getByText('Keep pouring').first().waitFor()
    expect(Math.abs(await shown(page) - before)).toBeLessThanOrEqual(1)

    await hand(page, 'Lift')
    await page.getByText('The pour is paused.').waitFor()
    await hand(page, 'Spill')
    await hand(page, 'Put back')
    await page.getByRole('heading', { name: /less than before. Why\?/ }).waitFor()
    expect(await forward.isDisabled()).toBe(true)
    await page.getByRole('button', { name: 'Some was poured out' }).click()
    await page.getByText('Keep pouring').first().waitFor()
    const after = await shown(page)
    expect(before - after).toBeGreaterThan(4)

    const code = await codeOf(page)
    await page.reload()
    await hands(page).waitFor()
    expect(await shown(page)).toBe(after)
    expect(await page.getByRole('main').innerText()).toContain(code)
    const draft = await admin('batch_drafts').where({ code }).first<{ body: string }>('body')
    expect((JSON.parse(draft.body) as { corrections: { cause: string, reason: string }[] }).corrections[0])
      .toMatchObject({ cause: 'cup-lifted', reason: expect.stringContaining('Some was poured out') as string })
  }, 240_000)

  it('opens the correction by itself, moves no button, and logs what was corrected as simulated', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpOnPracticeScale(page, mix.name, '12')
    const code = await codeOf(page)
    await pourOnScale(page, Number(await targetOf(page)))
    await next(page)
    await putOnWhatIsAsked(page)
    // Too much hardener: the sheet opens by itself, and nothing in the bottom row changes its place or its words.
    const slots = () => page.locator('main button').filter({ hasText: /^(Stop this mix|Tare|Next component)/ }).evaluateAll((buttons) => buttons.map((button) => [button.textContent?.trim().slice(0, 14), Math.round(button.getBoundingClientRect().x)]))
    const places = await slots()
    const hardener = Number(await targetOf(page))
    await runIn(page, 'Pour', hardener * 1.1)
    await page.getByRole('heading', { name: /^Correct the others/ }).waitFor()
    expect(await slots()).toEqual(places)
    await page.getByRole('button', { name: /^Correct the others/ }).click()
    const standing = page.getByRole('region', { name: 'Stir and stand' })
    for (let left = 4; left > 0 && !await standing.isVisible(); left -= 1) {
      await pourOnScale(page, Number(await targetOf(page)))
      await next(page)
    }
    expect(await labelAndLog(page)).toBe(code)
    const pours = await poursOf(code)
    expect(new Set(pours.map(({ source }) => source))).toEqual(new Set(['simulated']))
    expect(pours.some(({ round }) => round > 0)).toBe(true)
  }, 240_000)

  it('that is lost keeps its last reading, and the rest is typed and marked so', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpOnPracticeScale(page, mix.name, '6')
    await runIn(page, 'Pour', 100)
    await hand(page, 'Pull')
    await page.getByText('Scale lost').waitFor()
    const last = await shown(page)
    expect(last).toBeGreaterThan(99)
    expect(await page.getByText(/last reading/).isVisible()).toBe(true)
    await hand(page, 'Type')
    expect(Number(await page.getByLabel(/^Grams of .* on the scale/).inputValue())).toBe(last)
    await pourToTargets(page)
    const code = await labelAndLog(page)
    expect(new Set((await poursOf(code)).map(({ source }) => source))).toEqual(new Set(['typed']))
  }, 120_000)
})

describe('stopping a mix', () => {
  it('into whose cup nothing came voids its number with the reason and logs no batch', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '2.4')
    const code = await codeOf(page)
    await page.getByRole('button', { name: 'Stop this mix' }).click()
    await page.getByText('Nothing is in the cup: no batch is logged.').waitFor()
    await page.getByRole('button', { name: 'Not needed any more' }).click()
    await Promise.all([
      page.waitForResponse((answer) => answer.url().endsWith('/discard') && answer.status() === 200),
      page.getByRole('button', { name: 'Stop and void the number' }).click(),
    ])
    await page.getByRole('button', { name: 'Loose mix, no job' }).waitFor()
    expect(await isInLog(code)).toBeUndefined()
    expect(await admin('voided_numbers').where({ series: 'batch', number: numberOf(code) }).pluck('reason')).toEqual(['Not needed any more'])
  })
})

/** Pages of a PDF and their size in points. */
function paperOf(pdf: Buffer): { pages: number, sizes: string[] } {
  const text = pdf.toString('latin1')
  return { pages: (text.match(/\/Type\s*\/Page\b(?!s)/g) ?? []).length, sizes: [...new Set(text.match(/\/MediaBox\s*\[[^\]]*\]/g) ?? [])] }
}

/** 62 × 40 mm in points of 1/72 inch, as a PDF writes it. */
const labelPaper = /\/MediaBox\s*\[\s*0 0 17[56](?:\.\d+)? 11[34](?:\.\d+)?\s*\]/

describe('the cup\'s label', () => {
  it('is one page of 62 by 40 mm, at the bench and from the log, and its code says the batch\'s own page', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '2.4')
    await pourToTargets(page)
    await page.getByRole('button', { name: 'It is stirred and scraped' }).click()
    await page.getByRole('list', { name: 'Steps' }).getByRole('button', { name: /Pour/ }).click()
    await page.getByText('Done: to look at, not to redo.').waitFor()
    await page.getByRole('button', { name: 'Back to work' }).click()
    await page.getByRole('button', { name: /^Next: label/ }).click()
    await page.getByRole('button', { name: 'Print the label' }).waitFor()
    await page.locator('.label-sheet:visible .label-qr').waitFor()
    const sheet = page.locator('.label-sheet:visible')
    expect(await sheet.innerText()).toContain('contains isocyanates')
    expect(await sheet.innerText()).toMatch(/use by\s+\d\d:\d\d/)
    expect(await axeFaults(page)).toEqual([])
    const atBench = paperOf(await page.pdf({ preferCSSPageSize: true }))
    expect(atBench.pages).toBe(1)
    expect(atBench.sizes).toHaveLength(1)
    expect(atBench.sizes[0]).toMatch(labelPaper)
    await page.getByRole('button', { name: /^Label is on the cup/ }).click()
    const logged = page.getByRole('heading', { name: /^B-\d{4,} is in the log$/ })
    await logged.waitFor()
    const batch = await isInLog((await logged.innerText()).split(' ')[0] ?? '')
    if (!batch) throw new Error('the batch is not in the record')

    await page.goto(`${baseUrl}/batches/${batch.id}`)
    await page.getByRole('link', { name: 'Label' }).click()
    await page.locator('.label-sheet:visible .label-qr').waitFor()
    const drawn = await page.locator('.label-sheet:visible .label-qr path').getAttribute('d')
    expect(drawn).toBe(drawQr(`${new URL(baseUrl).origin}/batches/${batch.id}`).d)
    const fromLog = paperOf(await page.pdf({ preferCSSPageSize: true }))
    expect(fromLog).toEqual(atBench)
    expect(await overflowsSideways(page)).toBe(false)
  }, 120_000)
})
