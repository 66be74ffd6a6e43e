import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { LiveClearance } from '#shared/schemas/live'
import type { DraftInput } from '#shared/schemas/drafts'
import { findTimerOf } from '../../server/repositories/timers'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { setExtraction } from '../../server/services/booth-air'
import { liveBooth } from '../../server/services/booth-view'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { settleDue } from '../../server/services/due-timers'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
  work.clock.now = morning
  await setExtraction(work.as('foreman'), work.shop.boothId, { state: 'running', at: null })
}, 120_000)
afterAll(() => work.close())

const at = (minutes: number) => {
  work.clock.now = morning + minutes * 60_000
}
async function pot(more: Partial<DraftInput> = {}): Promise<string> {
  const id = randomUUID()
  const loose: Partial<DraftInput> = { jobStepId: null, pieceIds: [], purpose: 'sample boards', components: poured(work.shop, ['1450', '725', '290']) }
  await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { ...loose, ...more }))
  await sealBatch(work.as('sprayer'), { draftId: id })
  return id
}
const shot = (id: string, kind: 'first-spray' | 'last-spray' | 'gun-flushed') => recordBatchEvent(work.as('sprayer'), id, { kind, gunId: null, at: null })
const extraction = (state: 'running' | 'off' | 'unknown') => setExtraction(work.as('sprayer'), work.shop.boothId, { state, at: null })
const clearance = async (): Promise<LiveClearance | null> => (await liveBooth(work.shop.boothId, work.clock.now, work.db)).clearance
const timer = () => findTimerOf('clearance', 'booth', work.shop.boothId, work.db)

describe('the clearance of a booth', () => {
  it('keeps everybody out from the first shot of isocyanates to the last one and the booth\'s minutes after it', async () => {
    at(0)
    const id = await pot()
    expect(await clearance()).toBeNull()
    at(5)
    await shot(id, 'first-spray')
    expect(await clearance()).toEqual({ state: 'spraying', since: minutesIn(5), lastShotAt: null, clearAt: null })
    expect(await timer()).toBeNull()
    at(20)
    await shot(id, 'last-spray')
    expect(await clearance()).toEqual({ state: 'counting', since: null, lastShotAt: minutesIn(20), clearAt: minutesIn(50) })
    expect(await timer()).toMatchObject({ state: 'waiting', dueAt: minutesIn(50), boothId: work.shop.boothId })
  })

  it('counts anew from the end of cleaning the gun', async () => {
    const id = await pot()
    at(60)
    await shot(id, 'first-spray')
    await shot(id, 'last-spray')
    at(66)
    await shot(id, 'gun-flushed')
    expect(await clearance()).toMatchObject({ state: 'counting', clearAt: minutesIn(96) })
  })

  it('rests while the extraction is off and begins anew when it runs again', async () => {
    at(80)
    await extraction('off')
    expect(await clearance()).toMatchObject({ state: 'stopped', clearAt: null, lastShotAt: minutesIn(66) })
    expect(await timer()).toMatchObject({ state: 'cancelled' })
    at(90)
    await extraction('unknown')
    expect(await clearance()).toMatchObject({ state: 'stopped' })
    at(100)
    await extraction('running')
    expect(await clearance()).toMatchObject({ state: 'counting', clearAt: minutesIn(130) })
    expect(await timer()).toMatchObject({ state: 'waiting', dueAt: minutesIn(130) })
    await expect(setExtraction(work.as('sprayer'), work.shop.boothId, { state: 'off', at: minutesIn(95) })).rejects.toMatchObject({ status: 422, code: 'changes-order' })
  })

  it('is over at its instant, told by its timer, and stays so when the extraction is switched off', async () => {
    at(130)
    const set = await timer()
    expect(await settleDue(work.asSystem(), { id: set?.id ?? '', action: 'fire' })).toBe(true)
    const told = await work.admin('events').where({ type: 'booth', subject: `booth:${work.shop.boothId}` }).orderBy('seq', 'desc').first<{ payload: string }>()
    expect(JSON.parse(told.payload)).toMatchObject({ id: work.shop.boothId, clearance: null })
    at(140)
    await extraction('off')
    expect(await clearance()).toBeNull()
    at(141)
    await extraction('running')
    expect(await clearance()).toBeNull()
  })

  it('takes the emptying as the last shot where nobody noted one', async () => {
    at(200)
    const id = await pot()
    await shot(id, 'first-spray')
    at(230)
    await closeBatch(work.as('sprayer'), id, { leftoverG: '10', at: null })
    expect(await clearance()).toMatchObject({ state: 'counting', lastShotAt: minutesIn(230), clearAt: minutesIn(260) })
  })

  it('is nothing that a mix without isocyanates starts', async () => {
    at(400)
    const id = await pot({ mixRevisionId: work.shop.plainMixRevisionId, components: poured(work.shop, ['500']) })
    await shot(id, 'first-spray')
    expect(await clearance()).toBeNull()
  })
})

describe('a gun that is loaded with something without isocyanates', () => {
  it('has ended spraying the pot before: the clearance counts from then, tapped or not', async () => {
    at(410)
    const before = await pot()
    await shot(before, 'first-spray')
    expect(await clearance()).toMatchObject({ state: 'spraying' })
    at(425)
    const plain = await pot({ mixRevisionId: work.shop.plainMixRevisionId, components: poured(work.shop, ['500']) })
    await shot(plain, 'first-spray')
    expect(await clearance()).toMatchObject({ state: 'counting', lastShotAt: minutesIn(425), clearAt: minutesIn(455) })
    await shot(plain, 'last-spray')
    at(456)
    expect(await clearance()).toBeNull()
  })
})

describe('the extraction', () => {
  it('is noted with its person, and what was before', async () => {
    at(500)
    await extraction('off')
    const [row] = await work.admin('booth_extraction_changes').where({ booth_id: work.shop.boothId }).orderBy('at', 'desc').limit(1).select<Record<string, unknown>[]>()
    expect(row).toMatchObject({ extraction: 'off', before: 'running', user_id: work.shop.users.sprayer })
    const count = () => work.admin('booth_extraction_changes').where({ booth_id: work.shop.boothId }).count({ n: '*' }).first()
    const before = await count()
    at(501)
    await extraction('off')
    expect(await count()).toEqual(before)
  })

  it('is that of a booth that is there', async () => {
    await expect(setExtraction(work.as('sprayer'), randomUUID(), { state: 'off', at: null })).rejects.toMatchObject({ status: 404 })
  })
})
