import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../server/database/connection'
import { codeOf, labelAndLog, next, pourToTargets, putOnWhatIsAsked, reactingMix, setUpLooseMix, targetOf, weigh } from './support/bench'
import { axeFaults, baseUrl, overflowsSideways } from './support/browser'
import { useVisitors } from './support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

const recorded = (code: string) => admin('batches').where({ code }).count<{ n: string }[]>({ n: '*' }).then(([row]) => Number(row?.n))

describe('the bench', () => {
  it('brings a planned coat to its first target in three taps', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    await page.getByRole('region', { name: 'Today\'s list' }).getByRole('button', { name: /Ready/ }).first().click()
    await page.getByRole('button', { name: /^Start (this pot|pot 1)/ }).click()
    await page.getByRole('button', { name: /^It is stirred/ }).click()
    expect(Number(await targetOf(page))).toBeGreaterThan(0)
    expect(await axeFaults(page)).toEqual([])
    expect(await overflowsSideways(page)).toBe(false)
    await page.getByRole('button', { name: 'Stop this mix' }).click()
  })

  it('goes on at the same gram after a reload in the middle of a pour, and logs it once', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '2.4')
    const base = await targetOf(page)
    await weigh(page, base)
    await page.getByText('In tolerance').first().waitFor()
    const code = await codeOf(page)
    await page.reload()
    await page.getByRole('region', { name: 'Pour', exact: true }).waitFor()
    expect(await page.getByRole('main').innerText()).toContain(code)
    expect(await page.getByLabel(/^Grams of .* on the scale/).inputValue()).toBe(base)
    await pourToTargets(page)
    expect(await labelAndLog(page)).toBe(code)
    expect(await recorded(code)).toBe(1)
  })

  it('reckons what to add when a hardener is too much, and the record keeps both', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '2.4')
    await weigh(page, await targetOf(page))
    await next(page)
    await putOnWhatIsAsked(page)
    const hardener = await targetOf(page)
    await weigh(page, (Number(hardener) * 1.1).toFixed(1))
    await page.getByRole('button', { name: /^Correct the others/ }).click()
    await pourToTargets(page)
    const code = await labelAndLog(page)
    const row = await admin('batches as b').join('batch_current as c', 'c.batch_id', 'b.id').where('b.code', code)
      .first<{ corrected: number; out_of_tolerance: number; id: string }>('c.corrected', 'c.out_of_tolerance', 'b.id')
    expect(row).toMatchObject({ corrected: 1, out_of_tolerance: 0 })
    const rounds = await admin('batch_pours').where({ batch_id: row.id }).max<{ round: number }[]>({ round: 'round' })
    expect(Number(rounds[0]?.round)).toBeGreaterThan(0)
  })

  it('works on without a network, says what waits, and the batch arrives once when the network is back', async () => {
    const { page, context } = await visitAs('sprayer', { screen: 'bench', losesNetwork: true })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '1.9')
    const code = await codeOf(page)
    await context.setOffline(true)
    await pourToTargets(page)
    await page.getByText(/Saved here, \d+ waiting/).waitFor()
    await page.getByRole('button', { name: 'It is stirred and scraped' }).click()
    await page.getByRole('button', { name: /^Next: label/ }).click()
    await page.getByRole('button', { name: /^Label is on the cup/ }).click()
    await page.getByRole('heading', { name: `${code} is saved on this bench` }).waitFor()
    expect(await recorded(code)).toBe(0)
    await context.setOffline(false)
    await page.getByRole('heading', { name: `${code} is in the log` }).waitFor()
    expect(await recorded(code)).toBe(1)
  })
})
