import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { pourToTargets, reactingMix, setUpLooseMix, untilReadyForOffline } from '../support/bench'
import { screens } from '../support/browser'
import { openLine } from '../support/line'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

/** Batches of loose mixes that these tests have made. */
const recorded = (): Promise<number> => admin('batches').where({ purpose: 'Browser test panels' }).count<{ n: string }[]>({ n: '*' }).then(([row]) => Number(row?.n))

describe('a bench that starts without a network', () => {
  it('shows its last list for whoever was signed in, mixes a pot to the label, and logs it once the line is whole', async () => {
    const line = await openLine()
    const { page, context } = await visitAs('sprayer', { screen: 'bench', losesNetwork: true })
    await page.goto(`${line.url}/bench`)
    // What an earlier build has left.
    await page.evaluate(() => caches.open('potbell-bench-older').then(() => undefined))
    const person = await page.getByRole('banner').locator('button[aria-haspopup=dialog]').last().innerText()
    await untilReadyForOffline(page)
    await page.evaluate(async () => { await navigator.serviceWorker.ready })
    const kept = await page.evaluate(async () => {
      const names = await caches.keys()
      const requests = await Promise.all(names.map(async (name) => (await caches.open(name)).keys()))
      return { names, urls: requests.flat().map(({ url }) => new URL(url).pathname) }
    })
    await expect.poll(() => page.evaluate(() => caches.keys())).not.toContain('potbell-bench-older')
    expect(kept.urls).toContain('/bench')
    expect(kept.urls.filter((path) => path.startsWith('/api'))).toEqual([])
    await page.close()
    const before = await recorded()
    line.cut()

    const cold = await context.newPage()
    await cold.setViewportSize(screens.bench)
    await cold.goto(`${line.url}/bench`)
    await cold.getByText(/No connection since/).waitFor()
    expect(await cold.getByRole('banner').innerText()).toContain(person.trim())
    const mix = await reactingMix(admin)
    await setUpLooseMix(cold, mix.name, '1.6')
    await pourToTargets(cold)
    await cold.getByRole('button', { name: 'It is stirred and scraped' }).click()
    await cold.getByRole('button', { name: /^Next: label/ }).click()
    await cold.getByRole('img', { name: 'Code of this batch\'s page' }).first().waitFor()
    await cold.getByRole('button', { name: /^Label is on the cup/ }).click()
    await cold.getByRole('heading', { name: /is saved on this bench$/ }).waitFor()

    line.mend()
    await cold.reload()
    await expect.poll(recorded, { timeout: 20_000 }).toBe(before + 1)
    await line.close()
  })

  it('says plainly that nobody can sign in where nobody was', async () => {
    const line = await openLine()
    const { page, context } = await visitAs('sprayer', { screen: 'bench', losesNetwork: true })
    await page.goto(`${line.url}/bench`)
    await untilReadyForOffline(page)
    await page.evaluate(async () => { await navigator.serviceWorker.ready })
    await page.evaluate(() => fetch('/api/session', { method: 'DELETE' }).then(() => localStorage.clear()))
    await page.close()
    line.cut()
    const cold = await context.newPage()
    await cold.goto(`${line.url}/bench`)
    await cold.getByText('Nobody was signed in at this bench before the network went.').waitFor()
    await line.close()
  })
})
