import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Batch } from '#shared/schemas/batches'
import { AmendmentBody, type AmendmentInput } from '#shared/schemas/amendments'
import type { DraftInput } from '#shared/schemas/drafts'
import * as z from 'zod/mini'
import { amendBatch } from '../../server/services/amendments'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { listBatches } from '../../server/services/batch-log'
import { rebuildBatches } from '../../server/services/batch-rebuild'
import { getBatch, sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { settleReview } from '../../server/services/reviews'
import type { Context } from '../../server/utils/context'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeApproval, makeLot } from '../factories/shop'
import { openWorkshop, stock, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop('amendments')
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.drop())

const loose: Partial<DraftInput> = { jobStepId: null, pieceIds: [], purpose: 'sample boards' }

/** 1450 : 725 : 290 of base, hardener and thinner; the hardener went in at minute −9, the pot lives to minute 111. */
async function pot(more: Partial<DraftInput> = {}): Promise<string> {
  const id = randomUUID()
  await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { ...loose, components: poured(work.shop, ['1450', '725', '290']), ...more }))
  await sealBatch(work.as('sprayer'), { draftId: id })
  return id
}
const amend = (id: string, body: Partial<AmendmentInput> & Pick<AmendmentInput, 'field' | 'from' | 'to'>, ctx: Context = work.as('foreman')) =>
  amendBatch(ctx, id, z.parse(AmendmentBody, { reason: 'Read wrongly off the scale', ...body }))
const later = (minutes: number) => {
  work.clock.now = morning + minutes * 60_000
}
const rows = (table: string, where: object) => work.admin(table).where(where).select<Record<string, unknown>[]>()
const hardener = (batch: Batch) => batch.components[1]
const potTimers = async (id: string) => (await work.admin('timers').where({ subject_id: id }).orderBy('due_at').select<{ due_at: Date; state: string }[]>('due_at', 'state'))

describe('grams put right', () => {
  it('stand in the record beside the old ones, with reason and name', async () => {
    const id = await pot()
    const batch = await amend(id, { field: 'pours.1.0.grams', from: '725', to: '752' })
    expect(batch.amendments).toMatchObject([{ field: 'pours.1.0.grams', from: '725', to: '752', reason: 'Read wrongly off the scale', userName: `foreman ${work.shop.mark}` }])
    expect(await rows('batch_pours', { batch_id: id, component_index: 1 })).toMatchObject([{ grams: '725.0000' }])
    expect(await rows('batches', { id })).toMatchObject([{ poured_total_g: '2465.0000' }])
    expect(batch).toMatchObject({ amended: true, pouredTotalG: '2492', outOfTolerance: true, worstDeviationPct: '3.7241' })
    expect(hardener(batch)).toMatchObject({ pouredG: '752', verdict: 'too-much', pours: [{ grams: '752' }] })
    expect(batch.working.find(({ what }) => what.includes('off the ratio'))?.formula).toContain('752 g')
  })

  it('move the difference in stock, and the old movement stays', async () => {
    const before = Number(await stock(work.shop.lots.hardener, work.admin))
    const id = await pot()
    await amend(id, { field: 'pours.1.0.grams', from: '725', to: '700' })
    expect(Number(await stock(work.shop.lots.hardener, work.admin))).toBe(before - 700)
    expect(await work.admin('lot_movements').where({ batch_id: id, lot_id: work.shop.lots.hardener }).orderBy('kind').select('kind', 'grams'))
      .toEqual([{ kind: 'poured', grams: '-725.0000' }, { kind: 'compensation', grams: '25.0000' }])
  })

  it('are refused when somebody else was quicker, with what holds now', async () => {
    const id = await pot()
    await amend(id, { field: 'pours.1.0.grams', from: '725', to: '720' })
    await expect(amend(id, { field: 'pours.1.0.grams', from: '725', to: '730' })).rejects.toMatchObject({
      status: 409, code: 'changed', fields: [{ path: 'from' }], extra: { current: { id, pouredTotalG: '2460' } },
    })
    expect(await rows('amendments', { batch_id: id })).toHaveLength(1)
  })

  it('are the same however they are written', async () => {
    const id = await pot()
    expect(hardener(await amend(id, { field: 'pours.1.0.grams', from: '725.000', to: '726.50' }))?.pouredG).toBe('726.5')
    await expect(amend(id, { field: 'pours.1.0.grams', from: '726.5', to: '726.500' })).rejects.toMatchObject({ status: 422, code: 'nothing-changed' })
  })

  it('open a review when they are out of tolerance, and again after it was settled', async () => {
    const id = await pot()
    expect(await amend(id, { field: 'pours.1.0.grams', from: '725', to: '800' })).toMatchObject({ review: ['out-of-tolerance'], openReview: ['out-of-tolerance'], reviewOpen: true })
    expect(await settleReview(work.as('foreman'), id, { codes: ['out-of-tolerance'], reason: 'Panel hard' })).toMatchObject({ openReview: [], reviewOpen: false })
    later(1)
    expect(await amend(id, { field: 'pours.1.0.grams', from: '800', to: '810' })).toMatchObject({ openReview: ['out-of-tolerance'], reviewOpen: true })
  })

  it.each<[string, Partial<AmendmentInput> & Pick<AmendmentInput, 'field' | 'from' | 'to'>, number, string]>([
    ['more than the scale can hold', { field: 'pours.0.0.grams', from: '1450', to: '9000' }, 422, 'over-scale'],
    ['a weighing that is not there', { field: 'pours.1.7.grams', from: null, to: '5' }, 400, 'invalid'],
    ['no amount at all', { field: 'pours.1.0.grams', from: '725', to: null }, 400, 'invalid'],
    ['a comma', { field: 'pours.1.0.grams', from: '725', to: '7,5' }, 400, 'invalid'],
  ])('refuse %s', async (_what, body, status, code) => {
    const id = await pot()
    await expect(amend(id, body)).rejects.toMatchObject({ status, code })
    expect(await rows('amendments', { batch_id: id })).toEqual([])
  })
})

describe('a lot put right', () => {
  it('gives the grams back to the one and takes them from the other, and the log finds the batch there', async () => {
    const other = await makeLot(work.admin, work.shop.materials.hardener, '2000')
    const before = Number(await stock(work.shop.lots.hardener, work.admin))
    const id = await pot()
    const batch = await amend(id, { field: 'pours.1.0.lotId', from: work.shop.lots.hardener, to: other })
    expect(Number(await stock(work.shop.lots.hardener, work.admin))).toBe(before)
    expect(await stock(other, work.admin)).toBe('1275.0000')
    expect(hardener(batch)?.pours[0]).toMatchObject({ lotId: other, grams: '725' })
    expect(batch.amendments[0]?.toName).toBe(hardener(batch)?.pours[0]?.lotNumber)
    const found = async (lotId: string) => (await listBatches(work.as('sprayer'), { lotId, limit: 50 })).items.map((item) => item.id)
    expect(await found(other)).toEqual([id])
    expect(await found(work.shop.lots.hardener)).not.toContain(id)
  })

  it('must be of the same material, and past its date needs a foreman', async () => {
    const id = await pot()
    const field = 'pours.1.0.lotId'
    await expect(amend(id, { field, from: work.shop.lots.hardener, to: work.shop.lots.base })).rejects.toMatchObject({ status: 422, code: 'lot-of-other-material' })
    const old = await makeLot(work.admin, work.shop.materials.hardener, '2000', { expires_on: '2026-11-10' })
    await expect(amend(id, { field, from: work.shop.lots.hardener, to: old })).rejects.toMatchObject({
      status: 422, code: 'approval-needed', extra: { approval: { action: 'use-expired-lot', subject: `lot:${old}` } },
    })
    const approvals = [await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${old}`, morning)]
    expect((await amend(id, { field, from: work.shop.lots.hardener, to: old, approvals })).amendments[0]?.approvedByName).toBe(`foreman ${work.shop.mark}`)
  })
})

describe('the start of a pot\'s life', () => {
  it('may be put earlier by anyone who may amend; its timers move', async () => {
    const id = await pot()
    const batch = await amend(id, { field: 'reactiveAt', from: minutesIn(-9), to: minutesIn(-29) }, work.as('sprayer'))
    expect(batch).toMatchObject({ reactiveAt: minutesIn(-29), lateAt: minutesIn(61), endsAt: minutesIn(91), potLife: { startsAt: minutesIn(-29), potLifeMin: '120' } })
    expect(await potTimers(id)).toEqual([{ due_at: new Date(minutesIn(61)), state: 'waiting' }, { due_at: new Date(minutesIn(91)), state: 'waiting' }])
    expect(await work.admin('events').where({ type: 'pot', subject: `batch:${id}` }).orderBy('seq', 'desc').first('payload')).toMatchObject({ payload: expect.stringContaining(minutesIn(91)) })
  })

  it('is put later only with an approval that fits, once', async () => {
    const id = await pot()
    const body = { field: 'reactiveAt', from: minutesIn(-9), to: minutesIn(-2) }
    const needed = { status: 422, code: 'approval-needed', extra: { approval: { action: 'late-reactive-at', subject: `batch:${id}` } } }
    await expect(amend(id, body)).rejects.toMatchObject(needed)
    const other = await makeApproval(work.admin, work.shop, 'late-reactive-at', `batch:${randomUUID()}`, morning)
    await expect(amend(id, { ...body, approvals: [other] })).rejects.toMatchObject(needed)
    const approvals = [await makeApproval(work.admin, work.shop, 'late-reactive-at', `batch:${id}`, morning)]
    expect(await amend(id, { ...body, approvals })).toMatchObject({ endsAt: minutesIn(118) })
    await expect(amend(id, { field: 'reactiveAt', from: minutesIn(-2), to: minutesIn(-1), approvals })).rejects.toMatchObject(needed)
    expect((await potTimers(id))[1]?.due_at).toEqual(new Date(minutesIn(118)))
  })

  it('needs one too where a colder cup would live longer, and makes a pot late that was sprayed in time', async () => {
    const id = await pot({ climate: { airC: '25', rhPct: '50', surfaceC: null } })
    await expect(amend(id, { field: 'airC', from: '25', to: '20' })).rejects.toMatchObject({ status: 422, code: 'approval-needed' })
    later(60)
    await recordBatchEvent(work.as('sprayer'), id, { kind: 'last-spray', gunId: null, at: null })
    const { used } = await getBatch(work.as('sprayer'), id)
    const warm = await amend(id, { field: 'airC', from: '25', to: '30' })
    expect([used, warm.used, warm.state]).toEqual(['late', 'past-life', 'life-up'])
    expect(warm.climate).toEqual({ airC: '30', rhPct: '50', surfaceC: null })
  })

  it.each([['after the first spray', 6], ['ahead of now', 90]])('cannot lie %s', async (_what, minute) => {
    const id = await pot()
    later(30)
    await recordBatchEvent(work.as('sprayer'), id, { kind: 'first-spray', gunId: null, at: minutesIn(5) })
    const approvals = [await makeApproval(work.admin, work.shop, 'late-reactive-at', `batch:${id}`, work.clock.now)]
    await expect(amend(id, { field: 'reactiveAt', from: minutesIn(-9), to: minutesIn(minute), approvals })).rejects.toMatchObject({ status: 422, code: 'times-reversed' })
  })
})

describe('what happened to a pot', () => {
  it('is put right in its order, and the old value stays on record', async () => {
    const id = await pot()
    later(60)
    await recordBatchEvent(work.as('sprayer'), id, { kind: 'first-spray', gunId: null, at: minutesIn(5) })
    await recordBatchEvent(work.as('sprayer'), id, { kind: 'last-spray', gunId: null, at: minutesIn(40) })
    await closeBatch(work.as('sprayer'), id, { leftoverG: '50', at: null })
    await expect(amend(id, { field: 'closedAt', from: minutesIn(60), to: minutesIn(30) })).rejects.toMatchObject({ status: 422, code: 'times-reversed', fields: [{ path: 'to' }] })
    expect(await amend(id, { field: 'closedAt', from: minutesIn(60), to: minutesIn(45) })).toMatchObject({ closedAt: minutesIn(45), state: 'emptied' })
    expect(await rows('batch_events', { batch_id: id, kind: 'emptied' })).toMatchObject([{ at: new Date(minutesIn(60)) }])
    expect(await amend(id, { field: 'lastSprayAt', from: minutesIn(40), to: minutesIn(41) })).toMatchObject({ lastSprayAt: minutesIn(41) })
  })

  it('moves the waste by the difference where more or less was left', async () => {
    const id = await pot()
    await closeBatch(work.as('sprayer'), id, { leftoverG: '50', at: null })
    await amend(id, { field: 'leftoverG', from: '50', to: '80' })
    const batch = await amend(id, { field: 'leftoverG', from: '80', to: null })
    expect(batch).toMatchObject({ leftoverG: null, leftoverWeighed: false })
    const waste = await work.admin('waste_entries').where({ batch_id: id }).select<{ grams: string }[]>('grams')
    expect(waste.map(({ grams }) => grams).sort()).toEqual(['-80.0000', '30.0000', '50.0000'])
    await expect(amend(id, { field: 'leftoverG', from: null, to: '2465.1' })).rejects.toMatchObject({ status: 422, code: 'leftover-over-poured' })
  })

  it('is noted first and amended then', async () => {
    const id = await pot()
    await expect(amend(id, { field: 'lastSprayAt', from: null, to: minutesIn(0) })).rejects.toMatchObject({ status: 422, code: 'not-recorded' })
    await expect(amend(id, { field: 'leftoverG', from: null, to: '1' })).rejects.toMatchObject({ status: 422, code: 'not-recorded' })
  })

  it('takes booth, gun, person, purpose, note and readings', async () => {
    const id = await pot()
    await amend(id, { field: 'boothId', from: work.shop.boothId, to: work.shop.otherBoothId })
    await amend(id, { field: 'gunId', from: work.shop.gunId, to: null })
    await amend(id, { field: 'mixedByUserId', from: work.shop.users.sprayer, to: work.shop.users.manager })
    await amend(id, { field: 'purpose', from: 'sample boards', to: 'sample boards for the fair' })
    await amend(id, { field: 'viscosityCup', from: null, to: 'din-4' })
    await amend(id, { field: 'viscositySeconds', from: null, to: '25.50' })
    const batch = await amend(id, { field: 'note', from: null, to: 'Popping on front 3' })
    expect(batch).toMatchObject({
      boothId: work.shop.otherBoothId, gunId: null, mixedByName: `manager ${work.shop.mark}`, purpose: 'sample boards for the fair', note: 'Popping on front 3',
      viscosity: { cup: 'din-4', seconds: '25.5', materialC: null },
    })
    expect(await work.admin('timers').where({ subject_id: id }).pluck('booth_id')).toEqual([work.shop.otherBoothId, work.shop.otherBoothId])
    expect((await listBatches(work.as('foreman'), { boothId: work.shop.otherBoothId, mixedBy: work.shop.users.manager, limit: 50 })).items).toMatchObject([{ id, amended: true }])
    await expect(amend(id, { field: 'gunId', from: null, to: randomUUID() })).rejects.toMatchObject({ status: 400, fields: [{ path: 'to' }] })
    await expect(amend(id, { field: 'rhPct', from: null, to: '55' })).rejects.toMatchObject({ status: 422, code: 'air-first' })
  })
})

describe('a reading of the cup', () => {
  it('is shown as far as it is known', async () => {
    const id = await pot()
    expect((await amend(id, { field: 'materialC', from: null, to: '23.5' })).viscosity).toEqual({ cup: null, seconds: null, materialC: '23.5' })
    expect((await amend(id, { field: 'viscosityCup', from: null, to: 'din-4' })).viscosity).toEqual({ cup: 'din-4', seconds: null, materialC: '23.5' })
  })
})

describe('a lot that was poured after all', () => {
  const field = 'pours.1.0.lotId'
  const lot = async (id: string) => await work.admin('lots').where({ id }).first<{ state: string; opened_at: Date | null; count_needed: number }>('state', 'opened_at', 'count_needed')

  it('is opened as by its pour, and counted where more was taken than it had', async () => {
    const [full, short] = [await makeLot(work.admin, work.shop.materials.hardener, '2000'), await makeLot(work.admin, work.shop.materials.hardener, '700')]
    const id = await pot()
    const { components } = await amend(id, { field, from: work.shop.lots.hardener, to: full })
    expect(await lot(full)).toEqual({ state: 'in-use', opened_at: new Date(components[1]?.pours[0]?.at ?? ''), count_needed: 0 })
    await amend(id, { field, from: full, to: short })
    expect(await lot(short)).toMatchObject({ state: 'in-use', count_needed: 1 })
  })

  it('is signed for with the words of what is wrong with it', async () => {
    const id = await pot()
    const blocked = await makeLot(work.admin, work.shop.materials.hardener, '2000', { state: 'blocked', lot_number: `K-${work.shop.mark}` })
    const old = await makeLot(work.admin, work.shop.materials.hardener, '2000', { expires_on: '2026-11-10', lot_number: `O-${work.shop.mark}` })
    await expect(amend(id, { field, from: work.shop.lots.hardener, to: blocked })).rejects.toMatchObject({ message: `Lot K-${work.shop.mark} is blocked. A foreman has to sign that it was poured.` })
    await expect(amend(id, { field, from: work.shop.lots.hardener, to: old })).rejects.toMatchObject({
      message: `Lot O-${work.shop.mark} was past its use-by date on the day of the pour. A foreman has to sign that it was poured.`,
    })
    await work.admin('materials').where({ id: work.shop.materials.hardener }).update({ role: 'peroxide' })
    const asked = amend(id, { field, from: work.shop.lots.hardener, to: old })
    await expect(asked).rejects.toMatchObject({ code: 'approval-needed', message: expect.stringContaining('Nobody may allow an old peroxide; a foreman has to sign') })
    await work.admin('materials').where({ id: work.shop.materials.hardener }).update({ role: 'hardener' })
  })
})

describe('who may amend', () => {
  const body = { field: 'purpose', from: 'sample boards', to: 'doors' }

  it('a sprayer what he mixed, until the end of the shop\'s day', async () => {
    const [id, next] = [await pot(), await pot()]
    // The test shop's zone is UTC: its day ends at midnight there.
    work.clock.now = Date.parse('2026-11-17T23:59:59.000Z')
    expect((await amend(id, body, work.as('sprayer'))).purpose).toBe('doors')
    work.clock.now = Date.parse('2026-11-18T00:00:00.000Z')
    await expect(amend(next, body, work.as('sprayer'))).rejects.toMatchObject({ status: 403 })
    expect((await amend(next, body)).purpose).toBe('doors')
  })

  it('never a sprayer what another mixed, nor who mixed it, nor a bench', async () => {
    const id = await pot()
    await expect(amend(id, { field: 'mixedByUserId', from: work.shop.users.sprayer, to: work.shop.users.foreman }, work.as('sprayer'))).rejects.toMatchObject({ status: 403 })
    await amend(id, { field: 'mixedByUserId', from: work.shop.users.sprayer, to: work.shop.users.foreman })
    await expect(amend(id, body, work.as('sprayer'))).rejects.toMatchObject({ status: 403 })
    await expect(amend(id, body, work.asBench())).rejects.toMatchObject({ status: 403 })
    await expect(amend(randomUUID(), body)).rejects.toMatchObject({ status: 404 })
  })
})

describe('the audit of an amendment', () => {
  it('is one entry with ids and no words of anybody', async () => {
    const id = await pot()
    await amend(id, { field: 'note', from: null, to: 'Words of the foreman', reason: 'Reason in his own words' })
    await amend(id, { field: 'pours.1.0.grams', from: '725', to: '800', reason: 'Reason in his own words' })
    await settleReview(work.as('foreman'), id, { codes: ['out-of-tolerance'], reason: 'Reason in his own words' })
    const entries = await work.admin('audit_entries').where({ subject: `batch:${id}` }).whereIn('action', ['batch.amended', 'batch.review-settled']).orderBy('seq').select<{ action: string; bytes: string }[]>('action', 'bytes')
    expect(entries.map(({ action }) => action)).toEqual(['batch.amended', 'batch.amended', 'batch.review-settled'])
    const [amendment] = await rows('amendments', { batch_id: id, field: 'note' })
    expect(entries[0]?.bytes).toContain(String(amendment?.id))
    for (const { bytes } of entries) expect(bytes).not.toMatch(/words/i)
    expect(amendment).toMatchObject({ to_value: 'Words of the foreman', reason: 'Reason in his own words' })
  })
})

describe('a review', () => {
  it('is settled code by code by a foreman, whose words stand with the batch', async () => {
    const id = await pot({ components: poured(work.shop, ['1450', '800', null]) })
    expect(await getBatch(work.as('sprayer'), id)).toMatchObject({ openReview: ['out-of-tolerance', 'not-complete'] })
    expect(await settleReview(work.as('foreman'), id, { codes: ['not-complete'], reason: 'Sprayed unthinned' })).toMatchObject({ openReview: ['out-of-tolerance'], reviewOpen: true })
    await expect(settleReview(work.as('foreman'), id, { codes: ['not-complete'], reason: 'Again' })).rejects.toMatchObject({ status: 409, code: 'not-open', extra: { current: { id } } })
    work.clock.now += 1000
    const batch = await settleReview(work.as('manager'), id, { codes: ['out-of-tolerance'], reason: 'Hard after a week' })
    expect(batch).toMatchObject({ review: ['out-of-tolerance', 'not-complete'], openReview: [], reviewOpen: false })
    expect(batch.events.filter(({ kind }) => kind === 'review-settled')).toMatchObject([
      { userName: `foreman ${work.shop.mark}`, details: { codes: ['not-complete'], reason: 'Sprayed unthinned' } }, { details: { codes: ['out-of-tolerance'] } },
    ])
  })
})

describe('the present state made anew', () => {
  it('is what it was after everything above, and finds what was spoilt', async () => {
    const id = await pot()
    await amend(id, { field: 'pours.2.0.grams', from: '290', to: '280' })
    const before = await getBatch(work.as('foreman'), id)
    await work.admin('batch_current').where({ batch_id: id }).update({ poured_total_g: '1', used: 'late', effective: null })
    await work.admin('batch_uses').where({ batch_id: id }).delete()
    const { changed } = await rebuildBatches(work.asSystem())
    expect(changed).toEqual([id])
    expect(await getBatch(work.as('foreman'), id)).toEqual({ ...before, version: before.version + 1 })
    expect((await listBatches(work.as('foreman'), { materialId: work.shop.materials.thinner, limit: 200 })).items.map((item) => item.id)).toContain(id)
    expect((await rebuildBatches(work.asSystem())).changed).toEqual([])
  }, 60_000)
})
