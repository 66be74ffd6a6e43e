import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { BenchSnapshot, type BenchStep } from '#shared/schemas/bench'
import type { DraftInput } from '#shared/schemas/drafts'
import { blankSetup, setupForStep } from '#shared/utils/bench-setup'
import { sealBatch } from '../../server/services/batches'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { readBench } from '../../server/services/bench'
import { saveDraft } from '../../server/services/drafts'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeShop, type Shop } from '../factories/shop'
import { openLiveShop, type LiveShop } from './support/live'

let live: LiveShop
let shop: Shop
beforeAll(async () => { live = await openLiveShop('today') })
beforeEach(async () => {
  live.time.now = morning
  shop = await makeShop(live.admin)
})
afterAll(() => live.drop())

/** The factory's plan with another number of coats. */
const planOf = (coats: number): DraftInput['plan'] => ({ ...draftBody(shop).plan, coats })

async function draft(more: Partial<DraftInput>): Promise<string> {
  const id = randomUUID()
  await saveDraft(live.as('foreman'), id, draftBody(shop, { components: poured(shop, ['1450', '725', '290']), plan: planOf(2), ...more }))
  return id
}
async function seal(more: Partial<DraftInput>) {
  return sealBatch(live.as('foreman'), { draftId: await draft(more) })
}
const snapshot = () => readBench(live.as('foreman'))
async function row(): Promise<BenchStep> {
  const { today } = await snapshot()
  const found = today.find(({ jobStepId }) => jobStepId === shop.jobStepId)
  if (!found) throw new Error('the coat is not on today\'s list')
  return found
}
const left = (step: BenchStep) => step.pieces.map(({ coatsLeft }) => coatsLeft)

describe('today\'s list after a pot', () => {
  it('offers only the rest once pot 1 of 2 is in the record', async () => {
    const [first = '', second = '', third = ''] = shop.pieceIds
    expect(left(await row())).toEqual([2, 2, 2])
    await seal({ potCount: 2, pieceIds: [first, second] })
    const bench = await snapshot()
    expect(z.safeParse(BenchSnapshot, bench).error).toBeUndefined()
    const step = await row()
    expect(step).toMatchObject({ ready: 'ready', reason: null, areaM2: '0.4176' })
    expect(left(step)).toEqual([0, 0, 2])
    const home = { boothId: shop.boothId, scaleId: shop.scaleId }
    expect(setupForStep(step, bench, home, blankSetup(bench, home))).toMatchObject({ pieceIds: [third], areaM2: '0.4176', coats: 2 })
  })

  it('counts a pot from its first draft on, and not one that was stopped or thrown away', async () => {
    const stopped = { at: minutesIn(0), reason: 'Wrong tin', disposal: 'reactive waste' }
    await draft({ pieceIds: shop.pieceIds.slice(0, 1) })
    await draft({ pieceIds: shop.pieceIds, stopped })
    await seal({ pieceIds: shop.pieceIds, stopped })
    const step = await row()
    expect(left(step)).toEqual([0, 2, 2])
    expect(step.ready).toBe('ready')
  })

  it('says that all is mixed while the pot stands, and that it was when the pot is empty', async () => {
    const batch = await seal({ pieceIds: [] })
    expect(await row()).toMatchObject({ ready: 'mixing', reason: `Mixed, to be sprayed: ${batch.code}.`, areaM2: '0' })
    live.time.now = morning + 20 * 60_000
    await closeBatch(live.as('foreman'), batch.id, { leftoverG: '900', at: null, sprayed: false })
    expect(await row()).toMatchObject({ ready: 'done', reason: `All pieces are mixed: ${batch.code}.` })
  })

  it('names who is mixing the last pieces', async () => {
    await draft({ pieceIds: shop.pieceIds })
    const { ready, reason } = await row()
    expect(ready).toBe('mixing')
    expect(reason).toMatch(new RegExp(`^B-\\d{4,} is being mixed by sprayer ${shop.mark}\\.$`))
  })

  it('leaves one coat of two when each is mixed by itself', async () => {
    const batch = await seal({ pieceIds: shop.pieceIds, plan: planOf(1) })
    const mixed = await row()
    expect(mixed).toMatchObject({ ready: 'ready', areaM2: '1.2528' })
    expect(left(mixed)).toEqual([1, 1, 1])
    live.time.now = morning + 30 * 60_000
    await recordBatchEvent(live.as('foreman'), batch.id, { kind: 'last-spray', gunId: null, at: minutesIn(20) })
    const sprayed = await row()
    expect(sprayed.ready).toBe('wait')
    expect(left(sprayed)).toEqual([1, 1, 1])
  })
})
