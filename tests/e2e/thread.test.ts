import type { Page } from 'playwright-core'
import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../server/database/connection'
import { labelAndLog, pourToTargets, reactingMix, setUpLooseMix } from './support/bench'
import { axeFaults, signIn } from './support/browser'
import { advanceClock } from './support/clock'
import { emptyAllBut } from './support/pots'
import { useVisitors } from './support/visitors'

/**
 * The main job from one end to the other, as its people do it: the sprayer mixes at the bench, the booth's wall counts
 * and rings, the foreman finds it in the log.
 */
const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const minuteMs = 60_000
const { visit } = useVisitors()
afterAll(() => admin.destroy())

interface Row { id: string; booth_id: string; target_total_g: string; poured_total_g: string; late_at: Date; ends_at: Date; snapshot: string }

async function batchOf(code: string): Promise<Row> {
  const row = await admin('batches').where({ code }).first<Row | undefined>()
  if (!row) throw new Error(`${code} is not in the record`)
  return row
}

/** Opens the wall of a booth and counts the strokes of its bell. */
async function openWall(boothId: string): Promise<Page> {
  const wall = await visit({ screen: 'booth' })
  await wall.context.addInitScript(() => {
    const counted = window as unknown as { strokes: number }
    counted.strokes = 0
    const strike = OscillatorNode.prototype.start
    OscillatorNode.prototype.start = function (...times) {
      counted.strokes++
      strike.apply(this, times)
    }
  })
  await signIn(wall.page, 'foreman', `/screen/${boothId}`)
  await wall.page.getByRole('button', { name: /Tap to arm the bell/ }).click()
  await wall.page.getByText('Connected').waitFor()
  return wall.page
}

const strokes = (page: Page) => page.evaluate(() => (window as unknown as { strokes: number }).strokes)
const tile = (page: Page, code: string, state: string) => page.locator(`[data-pot="${code}"][data-state="${state}"]`)

async function serverNow(page: Page): Promise<number> {
  const { now } = await page.evaluate(() => fetch('/api/time').then((answer) => answer.json() as Promise<{ now: string }>))
  return Date.parse(now)
}

describe('the whole thread', () => {
  it('goes from a panel area to a pot that counts down and rings, and from there to the log', async () => {
    const mix = await reactingMix(admin)
    const bench = await visit({ screen: 'bench' })
    await signIn(bench.page, 'sprayer')
    expect(new URL(bench.page.url()).pathname).toBe('/bench')
    await setUpLooseMix(bench.page, mix.name, '4.5')
    const typed = await pourToTargets(bench.page)
    const code = await labelAndLog(bench.page)
    const batch = await batchOf(code)
    await emptyAllBut(code)

    // What was typed is what stands in the record, to the gram.
    const poured = await admin('batch_components').where({ batch_id: batch.id }).orderBy('component_index').pluck<string[]>('poured_g')
    expect(poured.map(Number).sort()).toEqual(typed.map(Number).sort())
    expect(Number(batch.poured_total_g)).toBeCloseTo(typed.reduce((sum, grams) => sum + Number(grams), 0), 4)

    const wall = await openWall(batch.booth_id)
    await tile(wall, code, 'fresh').waitFor()
    const before = await serverNow(wall)
    expect(batch.ends_at.getTime() - before).toBeGreaterThan(60 * minuteMs)

    await advanceClock(admin, batch.late_at.getTime() - before + 1_000)
    await tile(wall, code, 'closing').waitFor()
    expect(await axeFaults(wall)).toEqual([])

    await advanceClock(admin, batch.ends_at.getTime() - await serverNow(wall) + 1_000)
    await tile(wall, code, 'life-up').waitFor()
    await wall.waitForFunction((seen) => (window as unknown as { strokes: number }).strokes > seen, await strokes(wall))

    await tile(wall, code, 'life-up').getByRole('button', { name: 'Tap to silence' }).click()
    await tile(wall, code, 'life-up').getByRole('button', { name: /^Silent until/ }).waitFor()
    expect(await admin('timers').where({ subject_id: batch.id, kind: 'pot-up' }).first<{ silenced_by: string }>('silenced_by'))
      .toMatchObject({ silenced_by: expect.stringMatching(/\S/) as string })

    await tile(wall, code, 'life-up').getByRole('button', { name: 'Emptied' }).click()
    const sheet = wall.getByRole('dialog')
    await sheet.getByRole('button', { name: '3', exact: true }).click()
    await sheet.getByRole('button', { name: '5', exact: true }).click()
    await sheet.getByRole('button', { name: 'Emptied, 35 g left' }).click()
    await tile(wall, code, 'life-up').waitFor({ state: 'detached' })

    const desk = await visit({ screen: 'office' })
    await signIn(desk.page, 'foreman', '/batches')
    await desk.page.getByRole('link', { name: code }).click()
    await desk.page.getByRole('heading', { name: new RegExp(code) }).waitFor()
    const page = desk.page.getByRole('main')
    await page.getByText('Emptied', { exact: true }).waitFor()
    expect(await page.innerText()).toContain('35.0 g')
    expect(await axeFaults(desk.page)).toEqual([])
  }, 120_000)
})
