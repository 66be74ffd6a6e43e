import type { Page } from 'playwright-core'
import { afterAll, describe, expect, it } from 'vitest'
import { demoPassword } from '#shared/utils/demo'
import { createKnex } from '../../../server/database/connection'
import { labelAndLog, next, pourToTargets, putOnWhatIsAsked, reactingMix, setUpLooseMix, targetOf, weigh } from '../support/bench'
import { alive, axeFaults, baseUrl } from '../support/browser'
import { advanceClock } from '../support/clock'
import { keyboardOf, pointer, type Hand } from '../support/hand'
import { emptyAllBut } from '../support/pots'
import { useVisitors } from '../support/visitors'

/**
 * The main job from one end to the other, as its people do it: the sprayer mixes at the bench, has too much hardener in
 * the cup, corrects and logs; the booth's wall counts, rings and is answered; the foreman finds it in the log.
 */
const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visit } = useVisitors()
afterAll(() => admin.destroy())

interface Row { id: string; booth_id: string; poured_total_g: string; late_at: Date; ends_at: Date }

async function batchOf(code: string): Promise<Row> {
  const row = await admin('batches').where({ code }).first<Row | undefined>()
  if (!row) throw new Error(`${code} is not in the record`)
  return row
}

async function signInBy(hand: Hand, page: Page, role: 'sprayer' | 'foreman', to: string): Promise<void> {
  await page.goto(`${baseUrl}/sign-in?to=${encodeURIComponent(to)}`)
  await alive(page)
  await hand.fill(page.getByLabel('E-mail'), `${role}@potbell.example`)
  await hand.fill(page.getByLabel('Password', { exact: true }), demoPassword)
  await hand.press(page.getByRole('button', { name: 'Sign in', exact: true }))
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'))
}

/** Counts the strokes of the bell from before the page's first script on. */
const countStrokes = (page: Page) => page.context().addInitScript(() => {
  const counted = window as unknown as { strokes: number }
  counted.strokes = 0
  const strike = OscillatorNode.prototype.start
  OscillatorNode.prototype.start = function (...times) {
    counted.strokes++
    strike.apply(this, times)
  }
})

const strokes = (page: Page) => page.evaluate(() => (window as unknown as { strokes: number }).strokes)
const tile = (page: Page, code: string, state: string) => page.locator(`[data-pot="${code}"][data-state="${state}"]`)

async function serverNow(page: Page): Promise<number> {
  const { now } = await page.evaluate(() => fetch('/api/time').then((answer) => answer.json() as Promise<{ now: string }>))
  return Date.parse(now)
}

describe.each([
  { how: 'by finger and pointer', handOf: (): Hand => pointer },
  { how: 'by keyboard alone', handOf: keyboardOf },
])('the whole story $how', ({ handOf }) => {
  it('goes from a panel area over too much hardener to a pot that rings, and from there to the log', async () => {
    const mix = await reactingMix(admin)
    const bench = await visit({ screen: 'bench' })
    const sprayer = handOf(bench.page)
    await signInBy(sprayer, bench.page, 'sprayer', '/bench')
    await setUpLooseMix(bench.page, mix.name, '4.5', sprayer)
    const base = await targetOf(bench.page)
    await weigh(bench.page, base, sprayer)
    await next(bench.page, sprayer)
    await putOnWhatIsAsked(bench.page, sprayer)
    const hardener = (Number(await targetOf(bench.page)) * 1.1).toFixed(1)
    await weigh(bench.page, hardener, sprayer)
    await sprayer.press(bench.page.getByRole('button', { name: /^Correct the others/ }))
    const others = await pourToTargets(bench.page, sprayer)
    const code = await labelAndLog(bench.page, sprayer)
    const batch = await batchOf(code)
    await emptyAllBut(code)
    // What was typed is what stands in the record, to the gram.
    expect(Number(batch.poured_total_g)).toBeCloseTo([base, hardener, ...others].reduce((sum, grams) => sum + Number(grams), 0), 4)
    expect(await admin('batch_current').where({ batch_id: batch.id }).first<Record<string, number>>('corrected', 'out_of_tolerance', 'review_open'))
      .toMatchObject({ corrected: 1, out_of_tolerance: 0, review_open: 0 })

    const wall = await visit({ screen: 'booth' })
    const watcher = handOf(wall.page)
    await countStrokes(wall.page)
    await signInBy(watcher, wall.page, 'foreman', `/screen/${batch.booth_id}`)
    await watcher.press(wall.page.getByRole('button', { name: /Tap to arm the bell/ }))
    await wall.page.getByText('Connected').waitFor()
    await tile(wall.page, code, 'fresh').waitFor()

    await advanceClock(admin, batch.late_at.getTime() - await serverNow(wall.page) + 1_000)
    await tile(wall.page, code, 'closing').waitFor()
    expect(await axeFaults(wall.page)).toEqual([])
    const before = await strokes(wall.page)
    await advanceClock(admin, batch.ends_at.getTime() - await serverNow(wall.page) + 1_000)
    const up = tile(wall.page, code, 'life-up')
    await up.waitFor()
    await wall.page.waitForFunction((seen) => (window as unknown as { strokes: number }).strokes > seen, before)

    await watcher.press(up.getByRole('button', { name: 'Tap to silence' }))
    await up.getByRole('button', { name: /^Silent until/ }).waitFor()
    expect(await admin('timers').where({ subject_id: batch.id, kind: 'pot-up' }).first<{ silenced_by: string }>('silenced_by'))
      .toMatchObject({ silenced_by: expect.stringMatching(/\S/) as string })
    await watcher.press(up.getByRole('button', { name: 'Emptied' }))
    const sheet = wall.page.getByRole('dialog')
    // Nobody tapped a shot, so that it is asked for before the pot is gone.
    await watcher.press(sheet.getByRole('button', { name: 'It was not sprayed' }))
    await watcher.press(sheet.getByRole('button', { name: '3', exact: true }))
    await watcher.press(sheet.getByRole('button', { name: '5', exact: true }))
    await watcher.press(sheet.getByRole('button', { name: 'Emptied, 35 g left' }))
    await up.waitFor({ state: 'detached' })

    const desk = await visit({ screen: 'office' })
    const foreman = handOf(desk.page)
    await signInBy(foreman, desk.page, 'foreman', '/batches')
    await foreman.press(desk.page.getByRole('link', { name: code }))
    await foreman.press(desk.page.getByRole('link', { name: 'Open the batch' }))
    await desk.page.waitForURL((url) => url.pathname === `/batches/${batch.id}`)
    await desk.page.getByRole('heading', { name: new RegExp(code) }).waitFor()
    await desk.page.getByText('Emptied', { exact: true }).locator('visible=true').first().waitFor()
    await desk.page.getByText(/35\.0/).first().waitFor()
    expect(await axeFaults(desk.page)).toEqual([])
  }, 180_000)
})
