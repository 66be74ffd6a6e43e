import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { BatchEventBody } from '#shared/schemas/batches'
import type { DraftInput } from '#shared/schemas/drafts'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { rebuildBatches } from '../../server/services/batch-rebuild'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { potView } from '../../server/services/pot-view'
import { windowsAt } from '../../server/services/windows'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
let secondGun: string
beforeAll(async () => {
  work = await openWorkshop('pot_sprays')
  secondGun = randomUUID()
  const [gun] = await work.admin('guns').where({ id: work.shop.gunId }).select<Record<string, unknown>[]>()
  await work.admin('guns').insert({ ...gun, id: secondGun, name: `Second gun ${work.shop.mark}` })
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.drop())

async function pot(more: Partial<DraftInput> = {}): Promise<string> {
  const id = randomUUID()
  await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { components: poured(work.shop, ['1450', '725', '290']), ...more }))
  await sealBatch(work.as('sprayer'), { draftId: id })
  return id
}
const later = (minutes: number) => {
  work.clock.now = morning + minutes * 60_000
}
const shot = (id: string, kind: BatchEventBody['kind'], gunId: string | null = null) => recordBatchEvent(work.as('sprayer'), id, { kind, gunId, at: null })
const windowsOf = async (id: string) => (await windowsAt({ boothId: work.shop.boothId }, work.clock.now, work.db)).filter((window) => window.id === id)
const current = (id: string) => work.admin('batch_current').where({ batch_id: id }).first<Record<string, unknown>>()

/** One piece of the job on which nothing was sprayed yet. */
let position = 500
async function newPiece(): Promise<{ pieceIds: string[] }> {
  const id = randomUUID()
  const at = new Date(morning)
  await work.admin('pieces').insert({
    id, job_id: work.shop.jobId, position: ++position, label: `Door ${position}`, length_mm: '580', width_mm: '720', quantity: 1, faces: 'front',
    area_m2: '0.4176', created_at: at, updated_at: at,
  })
  return { pieceIds: [id] }
}

describe('a pot that feeds two guns', () => {
  it('writes its coat when the last of them has ended, from the first shot to the last', async () => {
    const id = await pot(await newPiece())
    later(5)
    await shot(id, 'first-spray')
    later(10)
    await shot(id, 'first-spray', secondGun)
    later(30)
    expect(await shot(id, 'last-spray')).toMatchObject({ applications: [], lastSprayAt: null, used: null })
    later(40)
    const done = await shot(id, 'last-spray', secondGun)
    expect(done).toMatchObject({ firstSprayAt: minutesIn(5), lastSprayAt: minutesIn(40), used: 'in-time' })
    expect(done.applications).toMatchObject([{ firstAt: minutesIn(5), lastAt: minutesIn(40), firstAssumed: false, lastAssumed: false, opensAt: minutesIn(100) }])
    expect(await potView(work.db, id)).toMatchObject({
      gunId: secondGun,
      guns: [
        { gunId: work.shop.gunId, firstSprayAt: minutesIn(5), lastSprayAt: minutesIn(30) },
        { gunId: secondGun, firstSprayAt: minutesIn(10), lastSprayAt: minutesIn(40) },
      ],
    })
  })

  it('keeps one first and one last spray for each of them', async () => {
    const id = await pot(await newPiece())
    await shot(id, 'first-spray')
    await expect(shot(id, 'first-spray')).rejects.toMatchObject({ status: 409, code: 'already-recorded' })
    await shot(id, 'first-spray', secondGun)
    await shot(id, 'last-spray', secondGun)
    await expect(shot(id, 'last-spray', secondGun)).rejects.toMatchObject({ status: 409, code: 'already-recorded' })
    await expect(recordBatchEvent(work.as('sprayer'), id, { kind: 'last-spray', gunId: null, at: minutesIn(-5) })).rejects.toMatchObject({ status: 422, code: 'spray-reversed' })
  })

  it('has each of them flushed once', async () => {
    const id = await pot(await newPiece())
    await shot(id, 'first-spray')
    await shot(id, 'last-spray')
    later(3)
    const { events } = await shot(id, 'gun-flushed')
    expect(events.at(-1)).toMatchObject({ kind: 'gun-flushed', at: minutesIn(3), gunName: `Gun ${work.shop.mark}` })
    await expect(shot(id, 'gun-flushed')).rejects.toMatchObject({ status: 409, code: 'already-recorded' })
  })

  it('stands in the present state as it would be made anew from the record', async () => {
    const id = await pot(await newPiece())
    await shot(id, 'first-spray')
    await shot(id, 'first-spray', secondGun)
    await shot(id, 'last-spray', secondGun)
    expect((await rebuildBatches(work.asSystem())).changed).not.toContain(id)
  }, 60_000)
})

describe('a last spray that nobody tapped', () => {
  it('leaves a window that closes by the first shot and opens ever later', async () => {
    const id = await pot(await newPiece())
    later(5)
    await shot(id, 'first-spray')
    for (const minute of [20, 50]) {
      later(minute)
      expect(await windowsOf(id)).toMatchObject([{ assumed: true, firstAt: minutesIn(5), lastAt: minutesIn(minute), opensAt: minutesIn(minute + 60), closesAt: minutesIn(245) }])
    }
    const told = await work.admin('events').where({ subject: `batch:${id}`, type: 'window' }).orderBy('seq').select<{ payload: string }[]>('payload')
    expect(told.map(({ payload }) => (JSON.parse(payload) as { unended: unknown } | null)?.unended)).toEqual([{ minMs: 3_600_000, maxMs: 14_400_000 }])
    await shot(id, 'last-spray')
    expect(await windowsOf(id)).toEqual([])
  })

  it('is assumed at the latest when the pot is emptied: the coat is written and says so', async () => {
    const pieces = await newPiece()
    const id = await pot(pieces)
    later(5)
    await shot(id, 'first-spray')
    later(50)
    const batch = await closeBatch(work.as('sprayer'), id, { leftoverG: '100', at: null })
    expect(batch).toMatchObject({ firstSprayAt: minutesIn(5), lastSprayAt: null, used: null })
    expect(batch.applications).toMatchObject([{ firstAt: minutesIn(5), lastAt: minutesIn(50), firstAssumed: false, lastAssumed: true, opensAt: minutesIn(110), closesAt: minutesIn(245) }])
    expect(batch.events.at(-1)).toMatchObject({ kind: 'emptied', details: { lastSprayAssumed: true } })
    expect((await windowsAt({ boothId: work.shop.boothId }, work.clock.now, work.db)).find((window) => window.id === batch.applications[0]?.id)).toMatchObject({ assumed: true, unended: null })
  })

  it('is no assumption where it is told with the emptying', async () => {
    const id = await pot(await newPiece())
    later(5)
    await shot(id, 'first-spray')
    later(50)
    const batch = await closeBatch(work.as('sprayer'), id, { leftoverG: '0', at: null, lastSprayAt: minutesIn(30) })
    expect(batch).toMatchObject({ lastSprayAt: minutesIn(30), used: 'in-time' })
    expect(batch.applications).toMatchObject([{ lastAt: minutesIn(30), lastAssumed: false }])
    await expect(closeBatch(work.as('sprayer'), await pot(await newPiece()), { leftoverG: '0', at: null, lastSprayAt: minutesIn(-60) })).rejects.toMatchObject({ status: 422, code: 'before-mixed' })
  })

  it('is put right by one that is told later', async () => {
    const id = await pot(await newPiece())
    await shot(id, 'first-spray')
    later(60)
    await closeBatch(work.as('sprayer'), id, { leftoverG: '0', at: null })
    // Of two coats of one instant nobody could say which was written later.
    later(61)
    const { applications } = await recordBatchEvent(work.as('sprayer'), id, { kind: 'last-spray', gunId: null, at: minutesIn(20) })
    const standing = (await windowsAt({ boothId: work.shop.boothId }, work.clock.now, work.db)).filter((window) => applications.some((one) => one.id === window.id))
    expect(standing).toMatchObject([{ assumed: false, opensAt: minutesIn(80) }])
  })

  it('is assumed with the first one where neither was tapped, but not of what was not sprayed', async () => {
    later(50)
    const close = async (more: { leftoverG: string; sprayed?: boolean }) => (await closeBatch(work.as('sprayer'), await pot(await newPiece()), { at: null, ...more })).applications
    expect(await close({ leftoverG: '10' })).toMatchObject([{ firstAt: minutesIn(-9), lastAt: minutesIn(50), firstAssumed: true, lastAssumed: true }])
    expect(await close({ leftoverG: '10', sprayed: false })).toEqual([])
    expect(await close({ leftoverG: '2465' })).toEqual([])
  })
})

describe('a first spray', () => {
  it('before the standing time is over is kept as a fact', async () => {
    const id = await pot(await newPiece())
    await work.admin('mix_revisions').where({ id: work.shop.mixRevisionId }).update({ induction_min: '30' })
    const view = await potView(work.db, id)
    expect(view).toMatchObject({ standsUntil: minutesIn(22) })
    later(10)
    const { events } = await shot(id, 'first-spray')
    expect(events[0]).toMatchObject({ details: { beforeStood: true, standsUntil: Date.parse(minutesIn(22)) } })
    later(23)
    expect((await shot(id, 'first-spray', secondGun)).events.at(-1)).toMatchObject({ details: {} })
    await work.admin('mix_revisions').where({ id: work.shop.mixRevisionId }).update({ induction_min: '0' })
  })
})

describe('the first coat of a planned job', () => {
  it('makes it run', async () => {
    await work.admin('jobs').where({ id: work.shop.jobId }).update({ state: 'planned' })
    const id = await pot(await newPiece())
    await shot(id, 'first-spray')
    expect(await work.admin('jobs').where({ id: work.shop.jobId }).first('state')).toEqual({ state: 'planned' })
    await shot(id, 'last-spray')
    expect(await work.admin('jobs').where({ id: work.shop.jobId }).first('state')).toEqual({ state: 'running' })
    expect((await current(id))?.last_spray_at).toEqual(new Date(morning))
  })
})

describe('a gun that is loaded from another pot', () => {
  // New guns for each test: in the record of the others stands what other tests did with them in the same hour.
  let gun: string
  let another: string
  beforeEach(async () => {
    [gun, another] = [randomUUID(), randomUUID()]
    const [known] = await work.admin('guns').where({ id: work.shop.gunId }).select<Record<string, unknown>[]>()
    await work.admin('guns').insert([gun, another].map((id) => ({ ...known, id, name: `Gun ${id.slice(0, 8)}` })))
  })

  it('has ended with the one before: its window stands still, and emptying assumes no later last spray', async () => {
    const before = await pot(await newPiece())
    later(5)
    await shot(before, 'first-spray', gun)
    expect(await windowsOf(before)).toMatchObject([{ unended: { minMs: 3_600_000, maxMs: 14_400_000 } }])
    later(20)
    const after = await pot(await newPiece())
    await shot(after, 'first-spray', gun)
    later(50)
    expect(await windowsOf(before)).toMatchObject([{ assumed: true, unended: null, lastAt: minutesIn(20), opensAt: minutesIn(80), closesAt: minutesIn(245) }])
    const told = await work.admin('events').where({ subject: `batch:${before}`, type: 'window' }).orderBy('seq', 'desc').first<{ payload: string }>('payload')
    expect(JSON.parse(told.payload)).toMatchObject({ unended: null, lastAt: minutesIn(20) })
    const { applications } = await closeBatch(work.as('sprayer'), before, { leftoverG: '0', at: null })
    expect(applications).toMatchObject([{ lastAt: minutesIn(20), lastAssumed: true, opensAt: minutesIn(80) }])
    await shot(after, 'last-spray', gun)
  })

  it('says nothing about the pot\'s other guns, one of which may still spray', async () => {
    const id = await pot(await newPiece())
    later(5)
    await shot(id, 'first-spray', gun)
    await shot(id, 'first-spray', another)
    later(20)
    const other = await pot(await newPiece())
    await shot(other, 'first-spray', gun)
    later(50)
    expect(await windowsOf(id)).toMatchObject([{ unended: { minMs: 3_600_000 }, lastAt: minutesIn(50) }])
    await shot(id, 'last-spray', another)
    expect(await windowsOf(id)).toMatchObject([{ unended: null, lastAt: minutesIn(50) }])
    await shot(other, 'last-spray', gun)
  })
})
