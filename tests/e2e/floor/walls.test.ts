import type { Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { labelAndLog, pourToTargets, reactingMix, setUpLooseMix } from '../support/bench'
import { axeFaults, baseUrl, signIn } from '../support/browser'
import { openLine } from '../support/line'
import { emptyAllBut } from '../support/pots'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 1 })
const { visit, visitAs } = useVisitors()
afterAll(() => admin.destroy())

const hourMs = 3_600_000

/** The one pot that these walls show, mixed for them; whatever else lived in the shop is emptied. */
let pot: { boothId: string; code: string }

beforeAll(async () => {
  const { page } = await visitAs('sprayer', { screen: 'bench' })
  await page.goto(`${baseUrl}/bench`)
  await setUpLooseMix(page, (await reactingMix(admin)).name, '1.5')
  await pourToTargets(page)
  const code = await labelAndLog(page)
  const { booth_id: boothId } = await admin('batches').where({ code }).first<{ booth_id: string }>('booth_id')
  pot = { boothId, code }
  await emptyAllBut(code)
}, 120_000)

const remaining = (page: Page, code: string) => page.locator(`[data-pot="${code}"] [role=timer] .sr-only`).innerText()

describe('walls of one booth', () => {
  it('show the same remaining time whatever their own clocks say', async () => {
    const { boothId, code } = pot
    const pages: Page[] = []
    for (const clockOffMs of [-24 * hourMs, -hourMs, 7 * 60_000, 50_000, 0]) {
      const { page } = await visitAs('foreman', { screen: 'booth', clockOffMs })
      await page.goto(`${baseUrl}/screen/${boothId}`)
      await page.getByText('Connected').waitFor()
      await page.locator(`[data-pot="${code}"]`).waitFor()
      pages.push(page)
    }
    // All counts change at the beginning of a second of the server: within one they must be the same words.
    await expect.poll(async () => new Set(await Promise.all(pages.map((page) => remaining(page, code)))).size, { timeout: 10_000, interval: 150 }).toBe(1)
    const clocks = await Promise.all(pages.map((page) => page.locator('header time').innerText()))
    expect(new Set(clocks).size).toBeLessThanOrEqual(2)
  })

  it('keep counting and say so when the server is lost, and are live again without a touch', async () => {
    const { boothId, code } = pot
    const line = await openLine()
    const { page } = await visit({ screen: 'booth', losesNetwork: true })
    await signIn(page, 'foreman', `/screen/${boothId}`, line.url)
    await page.getByText('Connected').waitFor()
    line.cut()
    await page.getByText(/No connection since \d\d:\d\d, timers run on/).waitFor({ timeout: 25_000 })
    const before = await page.locator('header time').innerText()
    expect(await remaining(page, code)).toMatch(/\d/)
    expect(before).toMatch(/^\d\d:\d\d$/)
    line.mend()
    await page.getByText('Connected').waitFor({ timeout: 15_000 })
    await line.close()
  })

  it('are an enrolled browser with nobody signed in: the manager makes it one, and it opens by itself', async () => {
    const { page } = await visit({ screen: 'booth' })
    await signIn(page, 'manager', '/shop')
    await page.getByLabel('Name (needed)', { exact: true }).fill('Wall of the browser test')
    await page.getByRole('button', { name: 'Make this browser the booth screen' }).click()
    await page.waitForURL((url) => url.pathname.startsWith('/screen/'))
    await page.evaluate(() => fetch('/api/session', { method: 'DELETE' }).then((answer) => answer.status))
    await page.goto(baseUrl)
    await page.waitForURL((url) => url.pathname.startsWith('/screen/'))
    await page.getByText('Connected').waitFor()
    expect(await axeFaults(page)).toEqual([])
  })

  it('flash only where motion is welcome', async () => {
    const { boothId } = pot
    const { page } = await visitAs('foreman', { screen: 'booth', reducedMotion: true })
    await page.goto(`${baseUrl}/screen/${boothId}`)
    await page.getByText('Connected').waitFor()
    const running = await page.evaluate(() => document.getAnimations().filter((animation) => animation.playState === 'running').length)
    expect(running).toBe(0)
  })
})
