import { randomUUID } from 'node:crypto'
import type { Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { listenForBell, ringsAgain, ringsOf, strikesAgain, strokesOf } from '../support/bell'
import { axeFaults, baseUrl } from '../support/browser'
import { advanceClock } from '../support/clock'
import { makeOwnBooth, type OwnBooth, type OwnPot } from '../support/own-booth'
import { emptyAllBut } from '../support/pots'
import { targetsOf, tooSmall } from '../support/targets'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
const minuteMs = 60_000
/** What a glove hits. */
const gloved = 64
const small = { width: 1280, height: 720 }
const large = { width: 1920, height: 1080 }

let own: OwnBooth
beforeAll(async () => {
  own = await makeOwnBooth(admin)
  await own.extraction('running')
})
afterAll(async () => {
  // Nothing of this file is offered to whoever works in the shop after it.
  await emptyAllBut('')
  await admin('booths').whereIn('id', [own.shop.boothId, own.shop.otherBoothId]).update({ active: false })
  await admin.destroy()
})

const tile = (page: Page, pot: OwnPot, state: string) => page.locator(`[data-pot="${pot.code}"][data-state="${state}"]`)
const runningAnimations = (page: Page) => page.evaluate(() => document.getAnimations().filter(({ playState }) => playState === 'running').length)

async function wallOf(boothId: string, options: { reducedMotion?: boolean } = {}): Promise<Page> {
  const { page } = await visitAs('foreman', { screen: 'booth', ...options })
  await listenForBell(page)
  await page.goto(`${baseUrl}/screen/${boothId}`)
  await page.getByRole('button', { name: /Tap to arm the bell/ }).click()
  await page.getByText('Connected').waitFor()
  return page
}

async function moveTo(instant: number): Promise<void> {
  await advanceClock(admin, instant - await own.now())
}

/** What is wrong with a wall as it hangs: for a screen reader, for gloves on both sizes of screen. */
async function wrongWith(page: Page): Promise<unknown[]> {
  const faults: unknown[] = await axeFaults(page)
  for (const size of [small, large]) {
    await page.setViewportSize(size)
    faults.push(...await tooSmall(page, gloved))
  }
  return faults
}

describe('a pot whose life ends', () => {
  it('rings on every wall of its booth within two seconds, on others it shows without a button, and it is silenced and emptied here', async () => {
    const pot = await own.mix({ jobStepId: null, pieceIds: [], purpose: 'Sample boards' })
    await emptyAllBut(pot.code)
    const walls = [await wallOf(own.shop.boothId), await wallOf(own.shop.boothId)] as const
    const elsewhere = await wallOf(own.shop.otherBoothId)
    const [wall] = walls
    await tile(wall, pot, 'fresh').waitFor()
    await elsewhere.getByText('No pots live').waitFor()
    expect(await wrongWith(wall)).toEqual([])
    expect(await wrongWith(elsewhere)).toEqual([])

    await moveTo(pot.lateAt)
    for (const one of walls) await tile(one, pot, 'closing').waitFor()
    expect(await axeFaults(wall)).toEqual([])
    // Two soft strokes, once.
    for (const one of walls) await strikesAgain(one, 1)
    await moveTo(pot.endsAt - 3_000)
    const dueAt = Date.now() + pot.endsAt - await own.now()
    await Promise.all(walls.map(async (one) => {
      await ringsAgain(one, 0)
      const [rangAt = 0] = await ringsOf(one)
      expect(rangAt - dueAt).toBeGreaterThan(-250)
      expect(rangAt - dueAt).toBeLessThanOrEqual(2_000)
      await tile(one, pot, 'life-up').waitFor()
    }))

    const there = tile(elsewhere, pot, 'life-up')
    await there.getByText(`Silence it in Booth ${own.shop.mark}`).waitFor()
    expect(await there.getByRole('button').count()).toBe(0)
    expect(await strokesOf(elsewhere)).toEqual([])
    expect(await axeFaults(elsewhere)).toEqual([])

    const up = tile(wall, pot, 'life-up')
    expect(await wrongWith(wall)).toEqual([])
    await wall.setViewportSize(small)
    const silence = (await targetsOf(up)).find(({ name }) => name === 'Tap to silence')
    expect(silence?.height).toBeGreaterThanOrEqual(96)
    await wall.setViewportSize(large)
    expect(await runningAnimations(wall)).toBeGreaterThan(0)
    const steady = await wallOf(own.shop.boothId, { reducedMotion: true })
    await tile(steady, pot, 'life-up').waitFor()
    expect(await runningAnimations(steady)).toBe(0)

    await up.getByRole('button', { name: 'Tap to silence' }).click()
    for (const one of walls) await tile(one, pot, 'life-up').getByRole('button', { name: /^Silent until/ }).waitFor()
    await up.getByRole('button', { name: 'Emptied' }).click()
    const sheet = wall.getByRole('dialog')
    await sheet.getByText(/When was the last shot/).waitFor()
    expect(await wrongWith(wall)).toEqual([])
    await sheet.getByRole('button', { name: 'It was not sprayed' }).click()
    await sheet.getByText('How much is left in the cup?').waitFor()
    expect(await wrongWith(wall)).toEqual([])
    await sheet.getByRole('button', { name: 'Emptied, not weighed' }).click()
    for (const one of [...walls, elsewhere]) await one.getByText('No pots live').waitFor()
    expect(await axeFaults(wall)).toEqual([])
  }, 300_000)
})

describe('three pots of one plan', () => {
  const planId = randomUUID()
  const potOf = (number: number) => own.mix({ planId, potNumber: number, potCount: 3, pieceIds: own.shop.pieceIds.slice(number - 1, number) })

  async function opened(wall: Page, pot: OwnPot): Promise<Locator> {
    await wall.getByRole('button', { name: `Pot ${pot.code}: spray or empty it` }).click()
    return wall.getByRole('dialog')
  }

  async function closeSheet(sheet: Locator): Promise<void> {
    await sheet.getByRole('button', { name: 'Close' }).click()
    await sheet.waitFor({ state: 'detached' })
  }

  it('start their windows by their first and last spray; one that nobody tapped is assumed and asked for; the booth says when it is clear', async () => {
    const pots = [await potOf(1), await potOf(2), await potOf(3)] as const
    const [first, second, third] = pots
    const wall = await wallOf(own.shop.boothId)
    const strip = (state: string) => wall.locator(`[data-keep-out="${state}"]`)
    await strip('ahead').waitFor()

    // Noted on the wall, gun by gun.
    const sheet = await opened(wall, first)
    await sheet.getByRole('button', { name: 'First spray' }).click()
    await strip('spraying').waitFor()
    const unended = wall.locator(`[data-window="${first.id}"]`)
    await unended.getByText('assumed: still spraying').waitFor()
    expect(await wrongWith(wall)).toEqual([])
    await sheet.getByRole('button', { name: 'Last spray' }).click()
    await strip('counting').waitFor()
    await closeSheet(sheet)
    await unended.waitFor({ state: 'detached' })
    const row = wall.locator('[data-window][data-state="too-early"]')
    expect(await row.getAttribute('data-assumed')).toBeNull()
    expect(await wrongWith(wall)).toEqual([])
    const windowId = await row.getAttribute('data-window') ?? ''

    // The count of the booth's 30 min runs by the clock, rests without extraction and then begins anew.
    const left = strip('counting').getByRole('timer')
    expect(await left.innerText()).toMatch(/^(30|29) min/)
    await advanceClock(admin, 12 * minuteMs)
    await own.extraction('running')
    await left.filter({ hasText: /^1[78] min/ }).waitFor()
    await own.extraction('off')
    await strip('stopped').getByText(/extraction is off: 30 min count once it runs/).waitFor()
    expect(await axeFaults(wall)).toEqual([])
    await own.extraction('running')
    await left.filter({ hasText: /^(30|29) min/ }).waitFor()

    // Nobody taps the last spray of the second pot; the same gun is loaded from the third.
    await (await opened(wall, second)).getByRole('button', { name: 'First spray' }).click()
    await wall.locator(`[data-window="${second.id}"][data-assumed]`).waitFor()
    await closeSheet(sheet)
    await (await opened(wall, third)).getByRole('button', { name: 'First spray' }).click()
    await sheet.getByText(`When was the last shot from ${second.code}?`).waitFor()
    await sheet.getByRole('button', { name: 'Ask again later' }).click()
    await sheet.getByRole('button', { name: 'Last spray' }).click()
    await closeSheet(sheet)
    // The gun is in another pot: what it still can have sprayed of the second has an end.
    const bounded = wall.locator(`[data-window="${second.id}"][data-assumed]`)
    await bounded.filter({ hasNotText: 'still spraying' }).waitFor()
    await (await opened(wall, second)).getByRole('button', { name: 'Emptied' }).click()
    await sheet.getByText(`When was the last shot from ${second.code}?`).waitFor()
    await sheet.getByRole('button', { name: /^Nobody knows/ }).click()
    await sheet.getByRole('button', { name: 'Emptied, nothing left' }).click()
    await bounded.waitFor({ state: 'detached' })
    const coat = (pot: OwnPot) => admin('applications as a').join('application_batches as ab', 'ab.application_id', 'a.id').where('ab.batch_id', pot.id)
      .first<{ last_at: Date; first_at: Date; last_assumed: number }>('a.last_at', 'a.first_at', 'a.last_assumed')
    expect(await coat(second)).toMatchObject({ last_assumed: 1, last_at: (await coat(third)).first_at })

    const times = await admin('applications').where({ id: windowId }).first<{ opens_at: Date; closing_at: Date; closes_at: Date }>('opens_at', 'closing_at', 'closes_at')
    for (const [state, at] of [['open', times.opens_at], ['closing', times.closing_at]] as const) {
      await moveTo(at.getTime())
      await wall.locator(`[data-window="${windowId}"][data-state="${state}"]`).waitFor()
    }
    // What can still be coated stands before what was missed: only when all have closed is there room for those.
    await moveTo(times.closes_at.getTime() + 60 * minuteMs)
    await wall.locator('[data-window][data-state="missed"]').nth(1).waitFor()
    expect(await axeFaults(wall)).toEqual([])
  }, 300_000)
})
