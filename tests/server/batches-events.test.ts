import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { BatchEventBody } from '#shared/schemas/batches'
import type { DraftInput } from '#shared/schemas/drafts'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import type { Context } from '../../server/utils/context'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

async function pot(more: Partial<DraftInput> = {}): Promise<string> {
  const id = randomUUID()
  await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { components: poured(work.shop, ['1450', '725', '290']), ...more }))
  await sealBatch(work.as('sprayer'), { draftId: id })
  return id
}
/** Pieces of the job on which nothing was sprayed yet. */
let position = 100
async function newPieces(count: number): Promise<{ pieceIds: string[] }> {
  const pieceIds = Array.from({ length: count }, () => randomUUID())
  const at = new Date(morning)
  await work.admin('pieces').insert(pieceIds.map((id) => ({
    id, job_id: work.shop.jobId, position: ++position, label: `Front ${position}`, length_mm: '580', width_mm: '720', quantity: 1, faces: 'front',
    area_m2: '0.4176', created_at: at, updated_at: at,
  })))
  return { pieceIds }
}
const loose: Partial<DraftInput> = { jobStepId: null, pieceIds: [], purpose: 'sample boards' }
const spray = (id: string, kind: BatchEventBody['kind'], minute: number | null, ctx: Context = work.as('sprayer')) =>
  recordBatchEvent(ctx, id, { kind, gunId: null, at: minute === null ? null : minutesIn(minute) })
const close = (id: string, leftoverG: string | null, ctx: Context = work.as('sprayer')) => closeBatch(ctx, id, { leftoverG, at: null })
const later = (minutes: number) => {
  work.clock.now = morning + minutes * 60_000
}
const rows = (table: string, where: object) => work.admin(table).where(where).select<Record<string, unknown>[]>()

describe('first and last spray', () => {
  it('are kept with person, gun and booth', async () => {
    const id = await pot()
    later(30)
    await spray(id, 'first-spray', 5)
    const batch = await spray(id, 'last-spray', null)
    expect(batch).toMatchObject({ firstSprayAt: minutesIn(5), lastSprayAt: minutesIn(30), used: 'in-time', version: 3, state: 'fresh' })
    expect(batch.events).toMatchObject([
      { kind: 'first-spray', at: minutesIn(5), userName: `sprayer ${work.shop.mark}`, gunName: `Gun ${work.shop.mark}`, boothName: `Booth ${work.shop.mark}` },
      { kind: 'last-spray', at: minutesIn(30) },
    ])
  })

  it('write the coat on its pieces and open its window', async () => {
    const id = await pot(await newPieces(2))
    later(30)
    await spray(id, 'first-spray', 5)
    const { applications } = await spray(id, 'last-spray', 20)
    expect(applications).toMatchObject([{ firstAt: minutesIn(5), lastAt: minutesIn(20), opensAt: minutesIn(80), closesAt: minutesIn(245) }])
    const [application] = applications
    expect(await rows('applications', { id: application?.id })).toMatchObject([{ coat_number: 1, face: 'front', kind: 'coat', job_step_id: work.shop.jobStepId, booth_id: work.shop.boothId }])
    expect(await rows('application_pieces', { application_id: application?.id })).toHaveLength(2)
    expect(await rows('application_batches', { application_id: application?.id })).toMatchObject([{ batch_id: id }])
    const timers = await work.admin('timers').where({ subject_id: application?.id }).orderBy('due_at').select<{ kind: string; due_at: Date }[]>('kind', 'due_at')
    // 165 min of window: closing begins 16.5 min before its end.
    expect(timers).toEqual([
      { kind: 'window-opens', due_at: new Date(minutesIn(80)) },
      { kind: 'window-closing', due_at: new Date(minutesIn(228.5)) },
      { kind: 'window-closes', due_at: new Date(minutesIn(245)) },
    ])
  })

  it('count the coats that lie on a piece: after the last one the overcoat\'s times hold', async () => {
    const pieces = await newPieces(1)
    const coat = async (planId: string) => {
      const { applications } = await spray(await pot({ ...pieces, planId }), 'last-spray', null)
      const [row] = await rows('applications', { id: applications[0]?.id })
      return [row?.coat_number, applications[0]?.opensAt]
    }
    const plan = randomUUID()
    expect(await coat(plan)).toEqual([1, minutesIn(60)])
    expect(await coat(plan)).toEqual([1, minutesIn(60)])
    expect(await coat(randomUUID())).toEqual([2, minutesIn(120)])
  })

  it('take the careful side where nobody tapped the first one', async () => {
    const { applications } = await spray(await pot(await newPieces(1)), 'last-spray', null)
    expect(applications).toMatchObject([{ firstAt: minutesIn(-9), lastAt: minutesIn(0) }])
    const [row] = await rows('applications', { id: applications[0]?.id })
    expect(JSON.parse(String(row?.details))).toMatchObject({ firstAssumed: true, purpose: 'coat-interval', empty: false })
  })

  it('are on all pieces of the job where none were chosen', async () => {
    const id = await pot({ pieceIds: [] })
    const [application] = (await spray(id, 'last-spray', null)).applications
    const all = await rows('pieces', { job_id: work.shop.jobId })
    expect(await rows('application_pieces', { application_id: application?.id })).toHaveLength(all.length)
  })

  it('open no window for a loose mix', async () => {
    expect((await spray(await pot(loose), 'last-spray', null)).applications).toEqual([])
  })

  it.each([
    ['in time up to the late limit', 81, 'in-time'],
    ['late after it', 82, 'late'],
    ['past its life after the end', 112, 'past-life'],
  ])('say that a pot was used %s', async (_when, minute, used) => {
    const id = await pot(loose)
    later(minute)
    expect((await spray(id, 'last-spray', null)).used).toBe(used)
  })

  it('happen once and in their order', async () => {
    const id = await pot(loose)
    later(60)
    await expect(spray(id, 'first-spray', -60)).rejects.toMatchObject({ status: 422, code: 'before-mixed' })
    await spray(id, 'first-spray', 20)
    await expect(spray(id, 'first-spray', 25)).rejects.toMatchObject({ status: 409, code: 'already-recorded', extra: { current: { firstSprayAt: minutesIn(20) } } })
    await expect(spray(id, 'last-spray', 10)).rejects.toMatchObject({ status: 422, code: 'spray-reversed' })
    expect((await spray(id, 'last-spray', 999)).lastSprayAt).toBe(minutesIn(60))
    await expect(spray(id, 'last-spray', null)).rejects.toMatchObject({ status: 409, code: 'already-recorded' })
  })

  it('may be told after the pot was emptied, but not have happened after it', async () => {
    const id = await pot(loose)
    later(30)
    await close(id, '0')
    later(40)
    await expect(spray(id, 'last-spray', 35)).rejects.toMatchObject({ status: 422, code: 'after-emptied' })
    expect(await spray(id, 'last-spray', 29)).toMatchObject({ state: 'emptied', lastSprayAt: minutesIn(29) })
  })

  it('write one coat after the other where two pots end on the same pieces at once', async () => {
    const pieces = await newPieces(2)
    const pots = [await pot({ ...pieces, planId: randomUUID() }), await pot({ ...pieces, planId: randomUUID() })]
    later(20)
    await Promise.all(pots.map((id) => spray(id, 'last-spray', null)))
    const coats = await work.admin('applications as a').join('application_batches as b', 'b.application_id', 'a.id').whereIn('b.batch_id', pots).pluck<number[]>('a.coat_number')
    expect(coats.sort()).toEqual([1, 2])
  })

  it('name a gun that is there', async () => {
    const id = await pot(loose)
    await expect(recordBatchEvent(work.as('sprayer'), id, { kind: 'first-spray', gunId: randomUUID(), at: null })).rejects.toMatchObject({ status: 400, fields: [{ path: 'gunId' }] })
  })
})

describe('emptying a pot', () => {
  it('cannot have come before its last spray', async () => {
    const id = await pot(loose)
    later(40)
    await spray(id, 'last-spray', 30)
    await expect(closeBatch(work.as('sprayer'), id, { leftoverG: '0', at: minutesIn(20) })).rejects.toMatchObject({ status: 422, code: 'before-last-spray' })
    expect(await close(id, '0')).toMatchObject({ state: 'emptied' })
  })

  it('ends its timers and books what was left as waste', async () => {
    const id = await pot(loose)
    later(50)
    const batch = await close(id, '120.5')
    expect(batch).toMatchObject({ state: 'emptied', closedAt: minutesIn(50), leftoverG: '120.5', leftoverWeighed: true, disposal: 'open-metal-can' })
    expect(await rows('timers', { subject_id: id })).toMatchObject([{ state: 'cancelled' }, { state: 'cancelled' }])
    expect(await rows('waste_entries', { batch_id: id })).toMatchObject([{ kind: 'leftover', grams: '120.5000', weighed: 1, disposal: 'open-metal-can', chemistry: 'polyurethane' }])
    const event = await work.admin('events').where({ subject: `batch:${id}`, type: 'pot' }).orderBy('seq', 'desc').first<{ payload: string }>()
    expect(JSON.parse(event.payload)).toMatchObject({ state: 'emptied', leftoverG: '120.5' })
  })

  it('wastes nothing when nothing was left, and says when nobody weighed it', async () => {
    const empty = await pot(loose)
    await close(empty, '0')
    expect(await rows('waste_entries', { batch_id: empty })).toEqual([])
    const unknown = await pot(loose)
    expect(await close(unknown, null)).toMatchObject({ leftoverG: null, leftoverWeighed: false })
    expect(await rows('waste_entries', { batch_id: unknown })).toMatchObject([{ grams: null, weighed: 0 }])
  })

  it('ends an alarm that rang', async () => {
    const id = await pot(loose)
    await work.admin('timers').where({ subject_id: id, kind: 'pot-up' }).update({ state: 'fired' })
    await close(id, '0')
    expect(await rows('timers', { subject_id: id, kind: 'pot-up' })).toMatchObject([{ state: 'done' }])
  })

  it('happens once: the second, also at the same moment, is told the first', async () => {
    const id = await pot(loose)
    const results = await Promise.allSettled([close(id, '10'), close(id, '20')])
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1)
    expect(results.find(({ status }) => status === 'rejected')).toMatchObject({ reason: { status: 409, code: 'already-closed', extra: { current: { state: 'emptied' } } } })
    expect(await rows('waste_entries', { batch_id: id })).toHaveLength(1)
  })

  it('leaves no more than was mixed, and no earlier than it was mixed', async () => {
    const id = await pot(loose)
    await expect(close(id, '2465.1')).rejects.toMatchObject({ status: 422, code: 'leftover-over-poured' })
    await expect(closeBatch(work.as('sprayer'), id, { leftoverG: '0', at: minutesIn(-30) })).rejects.toMatchObject({ status: 422, code: 'before-mixed' })
  })

  it('is not for a mix that was stopped or is still being made', async () => {
    const stopped = await pot({ ...loose, stopped: { at: minutesIn(0), reason: 'Spilt' } })
    await expect(close(stopped, '0')).rejects.toMatchObject({ status: 409, code: 'stopped' })
    await expect(spray(stopped, 'first-spray', null)).rejects.toMatchObject({ status: 409, code: 'stopped' })
    const open = randomUUID()
    await saveDraft(work.as('sprayer'), open, draftBody(work.shop))
    await expect(close(open, '0')).rejects.toMatchObject({ status: 409, code: 'not-sealed' })
    await expect(close(randomUUID(), '0')).rejects.toMatchObject({ status: 404 })
  })
})

describe('a booth\'s screen', () => {
  it('sprays and empties the pots of its booth', async () => {
    const id = await pot(loose)
    expect((await spray(id, 'first-spray', null, work.asScreen())).events).toMatchObject([{ userName: null, deviceName: `Screen ${work.shop.mark}` }])
    expect((await close(id, '5', work.asScreen())).state).toBe('emptied')
  })

  it('knows no pot of another booth', async () => {
    const id = await pot(loose)
    const other = work.asScreen(work.shop.otherBoothId)
    await expect(close(id, '0', other)).rejects.toMatchObject({ status: 404 })
    await expect(spray(id, 'first-spray', null, other)).rejects.toMatchObject({ status: 404 })
    expect(await rows('batch_current', { batch_id: id })).toMatchObject([{ state: 'fresh', version: 1 }])
  })
})
