import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { AmendmentBody } from '#shared/schemas/amendments'
import type { Batch, BatchEventBody } from '#shared/schemas/batches'
import type { DraftInput } from '#shared/schemas/drafts'
import { findTimerOf } from '../../server/repositories/timers'
import { amendBatch } from '../../server/services/amendments'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { rebuildBatches } from '../../server/services/batch-rebuild'
import { getBatch, sealBatch } from '../../server/services/batches'
import { setExtraction } from '../../server/services/booth-air'
import { liveBooth } from '../../server/services/booth-view'
import { saveDraft } from '../../server/services/drafts'
import { potView } from '../../server/services/pot-view'
import { windowsAt } from '../../server/services/windows'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeShop } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop('amend_sprays')
}, 120_000)
beforeEach(async () => {
  work.clock.now = morning
  Object.assign(work.shop, await makeShop(work.admin))
  for (const boothId of [work.shop.boothId, work.shop.otherBoothId]) await setExtraction(work.as('foreman'), boothId, { state: 'running', at: minutesIn(-60) })
})
afterAll(() => work.drop())

const later = (minutes: number) => {
  work.clock.now = morning + minutes * 60_000
}
async function pot(more: Partial<DraftInput> = {}): Promise<string> {
  const id = randomUUID()
  await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { components: poured(work.shop, ['1450', '725', '290']), ...more }))
  await sealBatch(work.as('sprayer'), { draftId: id })
  return id
}
const spray = (id: string, kind: BatchEventBody['kind'], minute: number) => recordBatchEvent(work.as('sprayer'), id, { kind, gunId: null, at: minutesIn(minute) })
async function sprayed(from: number, to: number): Promise<string> {
  const id = await pot()
  later(to)
  await spray(id, 'first-spray', from)
  await spray(id, 'last-spray', to)
  return id
}
const amend = (id: string, field: string, from: string | null, to: string | null): Promise<Batch> =>
  amendBatch(work.as('foreman'), id, z.parse(AmendmentBody, { field, from, to, reason: 'Noted at the wrong time' }))
const timersOf = async (id: string) => await work.admin('timers').where({ subject_id: id }).orderBy('due_at')
  .select<{ kind: string; due_at: Date; state: string; booth_id: string }[]>('kind', 'due_at', 'state', 'booth_id')
const clearance = async (boothId = work.shop.boothId) => (await liveBooth(boothId, work.clock.now, work.db)).clearance
const told = async (type: string, subject: string) =>
  (await work.admin('events').where({ type, subject }).orderBy('seq').select<{ booth_id: string | null; payload: string }[]>('booth_id', 'payload'))
    .map((row) => ({ boothId: row.booth_id, payload: JSON.parse(row.payload) as Record<string, unknown> | null }))

describe('the window of a coat', () => {
  it('opens by the last spray that was put right, and its timers move with it', async () => {
    const id = await sprayed(5, 20)
    later(25)
    const { applications: [coat] } = await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(24))
    expect(coat).toMatchObject({ firstAt: minutesIn(5), lastAt: minutesIn(24), opensAt: minutesIn(84), closesAt: minutesIn(245) })
    expect(await timersOf(coat?.id ?? '')).toMatchObject([
      { kind: 'window-opens', due_at: new Date(minutesIn(84)), state: 'waiting' },
      { kind: 'window-closing', due_at: new Date(minutesIn(228.9)), state: 'waiting' },
      { kind: 'window-closes', due_at: new Date(minutesIn(245)), state: 'waiting' },
    ])
    expect((await told('window', `application:${coat?.id}`)).at(-1)?.payload).toMatchObject({ lastAt: minutesIn(24), opensAt: minutesIn(84) })
    expect(await windowsAt({ jobIds: [work.shop.jobId] }, work.clock.now, work.db)).toMatchObject([{ opensAt: minutesIn(84), state: 'too-early' }])
  })

  it('closes by the first spray that was put right', async () => {
    const id = await sprayed(5, 20)
    const { applications: [coat] } = await amend(id, 'firstSprayAt', minutesIn(5), minutesIn(-5))
    expect(coat).toMatchObject({ firstAt: minutesIn(-5), closesAt: minutesIn(235) })
    expect((await timersOf(coat?.id ?? '')).at(-1)).toMatchObject({ kind: 'window-closes', due_at: new Date(minutesIn(235)) })
  })

  it('leaves the record as it was written, and can be made anew from it', async () => {
    const id = await sprayed(5, 20)
    const { applications: [coat] } = await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(18))
    const applicationId = coat?.id ?? ''
    expect(await work.admin('applications').where({ id: applicationId }).first()).toMatchObject({ last_at: new Date(minutesIn(20)), opens_at: new Date(minutesIn(80)) })
    await work.admin('application_current').where({ application_id: applicationId }).update({ last_at: new Date(minutesIn(1)), opens_at: null })
    expect((await rebuildBatches(work.asSystem())).changed).toEqual([id])
    expect((await getBatch(work.as('sprayer'), id)).applications).toMatchObject([{ lastAt: minutesIn(18), opensAt: minutesIn(78) }])
    expect((await rebuildBatches(work.asSystem())).changed).toEqual([])
  })

  it('goes to the booth that was put right, and leaves the wall of the other', async () => {
    const id = await sprayed(5, 20)
    const { applications: [coat] } = await amend(id, 'boothId', work.shop.boothId, work.shop.otherBoothId)
    const now = work.clock.now
    expect(await windowsAt({ boothId: work.shop.boothId }, now, work.db)).toEqual([])
    expect(await windowsAt({ boothId: work.shop.otherBoothId }, now, work.db)).toMatchObject([{ id: coat?.id, boothId: work.shop.otherBoothId }])
    expect((await timersOf(coat?.id ?? '')).map((timer) => timer.booth_id)).toEqual(Array.from({ length: 3 }, () => work.shop.otherBoothId))
    const events = await told('window', `application:${coat?.id}`)
    expect(events.at(-2)).toEqual({ boothId: work.shop.boothId, payload: null })
    expect(events.at(-1)).toMatchObject({ boothId: work.shop.otherBoothId, payload: { id: coat?.id } })
  })

  it('that is assumed follows the moment of emptying', async () => {
    const id = await pot()
    later(10)
    await spray(id, 'first-spray', 5)
    later(60)
    await closeBatch(work.as('sprayer'), id, { leftoverG: '10', at: null })
    const { applications: [coat] } = await amend(id, 'closedAt', minutesIn(60), minutesIn(40))
    expect(coat).toMatchObject({ firstAt: minutesIn(5), lastAt: minutesIn(40), opensAt: minutesIn(100), lastAssumed: true })
    expect(await clearance()).toMatchObject({ lastShotAt: minutesIn(40), clearAt: minutesIn(70) })
  })

  it('that was missed long ago does not ring again', async () => {
    const id = await sprayed(5, 20)
    const { applications: [coat] } = await getBatch(work.as('sprayer'), id)
    await work.admin('timers').where({ subject_id: coat?.id }).update({ state: 'done' })
    later(2 * 24 * 60)
    await amend(id, 'firstSprayAt', minutesIn(5), minutesIn(0))
    expect((await timersOf(coat?.id ?? '')).map(({ state }) => state)).toEqual(['done', 'done', 'done'])
    expect((await getBatch(work.as('sprayer'), id)).applications).toMatchObject([{ closesAt: minutesIn(240) }])
  })

  it('rings again where the coat that covered it was sprayed before it', async () => {
    const [first, second] = [await sprayed(5, 20), await sprayed(30, 40)]
    const under = (await getBatch(work.as('sprayer'), first)).applications[0]?.id ?? ''
    const over = (await getBatch(work.as('sprayer'), second)).applications[0]?.id ?? ''
    expect((await timersOf(under)).map(({ state }) => state)).toEqual(['cancelled', 'cancelled', 'cancelled'])
    later(90)
    await amend(second, 'firstSprayAt', minutesIn(30), minutesIn(2))
    expect((await timersOf(over)).map(({ state }) => state)).toEqual(['cancelled', 'cancelled', 'cancelled'])
    expect(await timersOf(under)).toMatchObject([
      { kind: 'window-opens', state: 'cancelled' },
      { kind: 'window-closing', due_at: new Date(minutesIn(228.5)), state: 'waiting' },
      { kind: 'window-closes', due_at: new Date(minutesIn(245)), state: 'waiting' },
    ])
    expect(await windowsAt({ jobIds: [work.shop.jobId] }, work.clock.now, work.db)).toMatchObject([{ id: under, closesAt: minutesIn(245) }])
  })

  it('of a coat that is still being sprayed follows the first spray', async () => {
    const id = await pot()
    later(10)
    await spray(id, 'first-spray', 5)
    await amend(id, 'firstSprayAt', minutesIn(5), minutesIn(2))
    expect(await windowsAt({ jobIds: [work.shop.jobId] }, work.clock.now, work.db)).toMatchObject([{ id, firstAt: minutesIn(2), closesAt: minutesIn(242) }])
    expect((await told('window', `batch:${id}`)).at(-1)?.payload).toMatchObject({ firstAt: minutesIn(2) })
    await amend(id, 'boothId', work.shop.boothId, work.shop.otherBoothId)
    expect((await told('window', `batch:${id}`)).slice(-2)).toMatchObject([{ boothId: work.shop.boothId, payload: null }, { boothId: work.shop.otherBoothId, payload: { id } }])
  })

  it('lengthens where another gun sprays the pot after the amendment', async () => {
    const id = await sprayed(5, 20)
    await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(15))
    later(40)
    const gunId = randomUUID()
    await work.admin('guns').insert({ ...await work.admin('guns').where({ id: work.shop.gunId }).first<object>(), id: gunId, name: `Second ${work.shop.mark}` })
    await recordBatchEvent(work.as('sprayer'), id, { kind: 'first-spray', gunId, at: minutesIn(30) })
    expect((await getBatch(work.as('sprayer'), id)).lastSprayAt).toBeNull()
    const { applications, lastSprayAt } = await recordBatchEvent(work.as('sprayer'), id, { kind: 'last-spray', gunId, at: minutesIn(40) })
    expect(lastSprayAt).toBe(minutesIn(40))
    expect(applications.at(-1)).toMatchObject({ lastAt: minutesIn(40), opensAt: minutesIn(100) })
    expect((await rebuildBatches(work.asSystem())).changed).toEqual([])
  })
})

describe('the clearance of a booth', () => {
  it('counts from the last spray that was put right, later or earlier', async () => {
    const id = await sprayed(5, 20)
    later(30)
    expect(await clearance()).toMatchObject({ clearAt: minutesIn(50) })
    await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(29))
    expect(await clearance()).toMatchObject({ state: 'counting', lastShotAt: minutesIn(29), clearAt: minutesIn(59) })
    const timer = () => findTimerOf('clearance', 'booth', work.shop.boothId, work.db)
    expect(await timer()).toMatchObject({ state: 'waiting', dueAt: minutesIn(59) })
    await amend(id, 'lastSprayAt', minutesIn(29), minutesIn(10))
    expect(await timer()).toMatchObject({ state: 'waiting', dueAt: minutesIn(40) })
    expect((await told('booth', `booth:${work.shop.boothId}`)).at(-1)?.payload).toMatchObject({ clearance: { clearAt: minutesIn(40) } })
  })

  it('keeps what another pot or a flushed gun did after it', async () => {
    const id = await sprayed(5, 20)
    later(26)
    await spray(id, 'gun-flushed', 26)
    await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(10))
    expect(await clearance()).toMatchObject({ lastShotAt: minutesIn(26) })
  })

  it('goes with the pot to its right booth', async () => {
    const id = await sprayed(5, 20)
    await amend(id, 'boothId', work.shop.boothId, work.shop.otherBoothId)
    expect(await clearance()).toBeNull()
    expect(await clearance(work.shop.otherBoothId)).toMatchObject({ state: 'counting', lastShotAt: minutesIn(20), clearAt: minutesIn(50) })
    expect(await findTimerOf('clearance', 'booth', work.shop.boothId, work.db)).toMatchObject({ state: 'cancelled' })
    expect(await findTimerOf('clearance', 'booth', work.shop.otherBoothId, work.db)).toMatchObject({ state: 'waiting', dueAt: minutesIn(50) })
  })
})

describe('the wall', () => {
  it('shows gun, person and sprays of a pot as they were put right', async () => {
    const id = await sprayed(5, 20)
    const gunId = randomUUID()
    await work.admin('guns').insert({ ...await work.admin('guns').where({ id: work.shop.gunId }).first<object>(), id: gunId, name: `Third ${work.shop.mark}` })
    await amend(id, 'gunId', work.shop.gunId, gunId)
    await amend(id, 'mixedByUserId', work.shop.users.sprayer, work.shop.users.manager)
    await amend(id, 'lastSprayAt', minutesIn(20), minutesIn(18))
    expect(await potView(work.db, id)).toMatchObject({ gunId, gunName: `Third ${work.shop.mark}`, mixedByName: `manager ${work.shop.mark}`, lastSprayAt: minutesIn(18) })
  })
})
