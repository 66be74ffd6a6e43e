import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { Batch } from '#shared/schemas/batches'
import type { DraftInput } from '#shared/schemas/drafts'
import { verifyChain } from '../../server/utils/audit'
import { saveDraft } from '../../server/services/drafts'
import { getBatch, sealBatch } from '../../server/services/batches'
import { potView } from '../../server/services/pot-view'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeApproval, makeLot, makeShop, type Shop } from '../factories/shop'
import { idempotency, openWorkshop, stock, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

const inTolerance = ['1450', '725', '290'] as const

async function draft(more: Partial<DraftInput> = {}, shop: Shop = work.shop): Promise<string> {
  const id = randomUUID()
  await saveDraft(work.asSystem(), id, draftBody(shop, { components: poured(shop, inTolerance), ...more }))
  return id
}
const seal = (draftId: string) => sealBatch(work.as('sprayer'), { draftId })
const sealed = async (more: Partial<DraftInput> = {}) => seal(await draft(more))
const rows = (table: string, where: object) => work.admin(table).where(where).select<Record<string, unknown>[]>()

describe('sealing a batch', () => {
  it('records what was meant and poured to the gram', async () => {
    const batch = await sealed({ climate: { airC: '20.5', rhPct: '48', surfaceC: '19' }, viscosity: { cup: 'din-4', seconds: '25', materialC: '20' } })
    expect(z.safeParse(Batch, batch).error).toBeUndefined()
    expect(batch).toMatchObject({
      outcome: 'mixed', state: 'fresh', review: [], targetTotalG: '2460', pouredTotalG: '2465', areaM2: '12', worstDeviationPct: '0',
      outOfTolerance: false, corrected: false, mixedAt: minutesIn(-8), sealedAt: minutesIn(0), chemistry: 'polyurethane', containsIsocyanates: true,
      climate: { airC: '20.5', rhPct: '48', surfaceC: '19' }, viscosity: { cup: 'din-4', seconds: '25', materialC: '20' },
    })
    expect(batch.components.map(({ plannedG, targetG, pouredG, deviationPct, verdict }) => [plannedG, targetG, pouredG, deviationPct, verdict])).toEqual([
      ['1447.1', '1447.1', '1450', '0.2004', 'in-tolerance'],
      ['723.5', '725', '725', '0', 'in-tolerance'],
      ['289.4', '290', '290', '0', 'in-tolerance'],
    ])
    expect(batch.pieces.map(({ label }) => label)).toEqual(['Front 1', 'Front 2', 'Front 3'])
    expect(batch.working.find(({ what }) => what === 'to mix')).toMatchObject({ formula: '2400 g × (1 + 0 %) + 60 g', value: '2460' })
    expect(await getBatch(work.as('sprayer'), batch.id)).toEqual(batch)
  })

  it('starts the pot, the step of the job and the tins', async () => {
    const shop = await makeShop(work.admin)
    const { id, potLife } = await sealBatch(work.asSystem(), { draftId: await draft({}, shop) })
    expect(potLife).toEqual({ startsAt: minutesIn(-9), lateAt: minutesIn(81), endsAt: minutesIn(111), basis: 'sheet', potLifeMin: '120' })
    expect(await rows('timers', { subject_id: id, kind: 'pot-up' })).toMatchObject([{ due_at: new Date(minutesIn(111)), state: 'waiting', booth_id: shop.boothId }])
    expect(await rows('job_steps', { id: shop.jobStepId })).toMatchObject([{ state: 'started', version: 2 }])
    expect(await rows('lots', { id: shop.lots.base })).toMatchObject([{ state: 'in-use', opened_at: new Date(minutesIn(-10)), count_needed: 0 }])
    expect(await rows('batch_drafts', { id })).toMatchObject([{ state: 'sealed' }])
  })

  it('opens each sealed tin at its own first pour, and leaves one in use as it is', async () => {
    const shop = await makeShop(work.admin)
    const before = new Date(minutesIn(-600))
    await work.admin('lots').where({ id: shop.lots.hardener }).update({ state: 'in-use', opened_at: before })
    const [base, ...others] = poured(shop, inTolerance) ?? []
    const second = await makeLot(work.admin, shop.materials.base, '1000')
    base?.pours.push({ lotId: second, grams: '1', at: minutesIn(-9), source: 'scale', round: 0 })
    await sealBatch(work.asSystem(), { draftId: await draft({ components: base ? [base, ...others] : [] }, shop) })
    expect(await rows('lots', { id: shop.lots.base })).toMatchObject([{ state: 'in-use', opened_at: new Date(minutesIn(-10)), version: 2 }])
    expect(await rows('lots', { id: second })).toMatchObject([{ state: 'in-use', opened_at: new Date(minutesIn(-9)), version: 2 }])
    expect(await rows('lots', { id: shop.lots.hardener })).toMatchObject([{ state: 'in-use', opened_at: before, version: 1 }])
  })

  it('answers and tells what a later look finds, with and without a job, and stopped', async () => {
    const loose = { jobStepId: null, pieceIds: [], purpose: 'sample' }
    const stopped = { reason: 'knocked over', at: minutesIn(-1) }
    for (const more of [{}, loose, { stopped }]) {
      const batch = await sealed(more)
      expect(await getBatch(work.as('sprayer'), batch.id)).toEqual(batch)
      const event = await work.admin('events').where({ subject: `batch:${batch.id}`, type: 'pot' }).orderBy('seq', 'desc').first<{ payload: string }>()
      expect(JSON.parse(event.payload)).toEqual(await potView(work.db, batch.id))
    }
  })

  it('takes the grams out of the lots in the same transaction', async () => {
    const shop = await makeShop(work.admin)
    const { id } = await sealBatch(work.asSystem(), { draftId: await draft({}, shop) })
    expect(await stock(shop.lots.base, work.admin)).toBe('3550.0000')
    expect(await stock(shop.lots.hardener, work.admin)).toBe('1775.0000')
    expect(await stock(shop.lots.thinner, work.admin)).toBe('710.0000')
    expect(await rows('lot_movements', { batch_id: id, kind: 'poured' })).toHaveLength(3)
  })

  it('leaves nothing behind when it fails at its very end', async () => {
    const shop = await makeShop(work.admin)
    const draftId = await draft({}, shop)
    const broken = work.as('sprayer', { idempotency: { ...idempotency(randomUUID()), status: 99_999_999 } })
    const asShop = { ...broken, principal: work.asSystem().principal }
    await expect(sealBatch(asShop, { draftId })).rejects.toThrow()
    expect(await stock(shop.lots.base, work.admin)).toBe('5000.0000')
    expect(await rows('batches', { id: draftId })).toEqual([])
    expect(await rows('batch_drafts', { id: draftId })).toMatchObject([{ state: 'open' }])
  })

  it('marks a lot for counting when more was poured than was booked in', async () => {
    const shop = await makeShop(work.admin)
    shop.lots.thinner = await makeLot(work.admin, shop.materials.thinner, '100')
    const batch = await sealBatch(work.asSystem(), { draftId: await draft({}, shop) })
    expect(batch.review).toEqual([])
    expect(await stock(shop.lots.thinner, work.admin)).toBe('-190.0000')
    expect(await rows('lots', { id: shop.lots.thinner })).toMatchObject([{ count_needed: 1 }])
  })

  it('keeps two tins of one component apart, and sums what one lot gave', async () => {
    const shop = await makeShop(work.admin)
    const second = await makeLot(work.admin, shop.materials.base, '1000')
    const [base, ...others] = poured(shop, ['1000', '725', '290']) ?? []
    const pour = (lotId: string, grams: string, minute: number) => ({ lotId, grams, at: minutesIn(minute), source: 'scale' as const, round: 0 })
    base?.pours.push(pour(second, '400', -10), pour(shop.lots.base, '50', -10), pour(second, '0', -10))
    const batch = await sealBatch(work.asSystem(), { draftId: await draft({ components: base ? [base, ...others] : [] }, shop) })
    expect(batch.components[0]).toMatchObject({ pouredG: '1450', pours: [{ grams: '1000' }, { grams: '400', lotId: second }, { grams: '50' }] })
    expect(await stock(shop.lots.base, work.admin)).toBe('3950.0000')
    expect(await stock(second, work.admin)).toBe('600.0000')
  })

  it('audits once and tells the booth what the pot is', async () => {
    const batch = await sealed()
    const audits = await rows('audit_entries', { subject: `batch:${batch.id}`, action: 'batch.sealed' })
    expect(audits).toHaveLength(1)
    const event = await work.admin('events').where({ subject: `batch:${batch.id}`, type: 'pot' }).orderBy('seq', 'desc').first<{ payload: string }>()
    expect(JSON.parse(event.payload)).toMatchObject({ stage: 'sealed', state: 'fresh', pouredG: '2465', endsAt: minutesIn(111) })
  })

  it('is already closing, or up, when it comes late', async () => {
    const id = await draft()
    work.clock.now = morning + 85 * 60_000
    expect((await seal(id)).state).toBe('closing')
    const other = await draft({ reactiveAt: minutesIn(-9) })
    work.clock.now = morning + 111 * 60_000
    expect((await seal(other)).state).toBe('life-up')
  })

  it('runs no time where nothing reacts', async () => {
    const more = { mixRevisionId: work.shop.plainMixRevisionId, jobStepId: null, pieceIds: [], purpose: 'sample boards' }
    const batch = await sealed({ ...more, components: poured(work.shop, ['300', null, null]), plan: { totalG: '300', scaleDivisionG: '0.1' } })
    expect(batch).toMatchObject({ state: 'no-pot-life', potLife: null, purpose: 'sample boards', jobId: null, worstDeviationPct: null, areaM2: null })
    expect(await rows('timers', { subject_id: batch.id })).toEqual([])
  })

  it('knows a correction from a first pour', async () => {
    const [base, hardener, thinner] = poured(work.shop, ['1447.1', '760', '304']) ?? []
    base?.pours.push({ lotId: work.shop.lots.base, grams: '72.9', at: minutesIn(-7), source: 'typed', round: 1 })
    const corrections = [{ at: minutesIn(-7), cause: 'reactive-too-much', accepted: true, newTargets: ['1520', '760', '304'] }]
    const batch = await sealed({ components: [base, hardener, thinner].flatMap((one) => one ?? []), corrections })
    expect(batch).toMatchObject({ corrected: true, outOfTolerance: false, review: [], pouredTotalG: '2584' })
    expect(batch.corrections).toMatchObject(corrections)
  })
})

describe('sealing twice', () => {
  it('answers the batch to another key and to another person', async () => {
    const id = await draft()
    const first = await sealBatch(work.as('sprayer', { idempotency: idempotency(randomUUID()) }), { draftId: id })
    const second = await sealBatch(work.as('sprayer', { idempotency: idempotency(randomUUID()) }), { draftId: id })
    expect(second).toEqual(first)
    expect(await sealBatch(work.as('foreman'), { draftId: id })).toEqual(first)
    expect(await rows('audit_entries', { subject: `batch:${id}`, action: 'batch.sealed' })).toHaveLength(1)
  })

  it.each(['the same key', 'keys of their own'])('makes one row of twenty at once with %s', async (which) => {
    const shop = await makeShop(work.admin)
    const id = await draft({}, shop)
    const key = randomUUID()
    const ctx = () => ({ ...work.asSystem(), idempotency: idempotency(which === 'the same key' ? key : randomUUID()) })
    const answers = await Promise.all(Array.from({ length: 20 }, () => sealBatch(ctx(), { draftId: id })))
    expect(new Set(answers.map((answer) => JSON.stringify(answer))).size).toBe(1)
    expect(await rows('batches', { id })).toHaveLength(1)
    expect(await rows('audit_entries', { subject: `batch:${id}`, action: 'batch.sealed' })).toHaveLength(1)
    expect(await stock(shop.lots.base, work.admin)).toBe('3550.0000')
  })

  it('refuses another body under the same key', async () => {
    const key = randomUUID()
    await sealBatch(work.as('sprayer', { idempotency: idempotency(key) }), { draftId: await draft() })
    const other = work.as('sprayer', { idempotency: idempotency(key, 'b'.repeat(64)) })
    await expect(sealBatch(other, { draftId: await draft() })).rejects.toMatchObject({ status: 422, code: 'idempotency-key-reused' })
  })
})

describe('what is in the cup is a fact', () => {
  it('is kept out of tolerance and waits for a foreman', async () => {
    const batch = await sealed({ components: poured(work.shop, ['1450', '800', '290']) })
    expect(batch).toMatchObject({ review: ['out-of-tolerance'], reviewOpen: true, outOfTolerance: true, worstDeviationPct: '10.3448' })
    expect(batch.components[1]).toMatchObject({ verdict: 'too-much', targetG: '725' })
  })

  it('needs no review when a foreman approved keeping it as poured', async () => {
    const id = randomUUID()
    const approvalId = await makeApproval(work.admin, work.shop, 'keep-as-poured', `batch:${id}`, morning)
    const corrections = [{ at: minutesIn(-1), cause: 'reactive-too-much', accepted: false, newTargets: [], reason: 'Test panel', approvalId }]
    await saveDraft(work.as('sprayer'), id, draftBody(work.shop, { components: poured(work.shop, ['1450', '800', '290']), corrections }))
    expect(await seal(id)).toMatchObject({ review: [], outOfTolerance: true, corrected: false })
  })

  it('does not take too much base for a wrong ratio', async () => {
    expect(await sealed({ components: poured(work.shop, ['1600', '800', '320']) })).toMatchObject({ review: [], outOfTolerance: false })
  })

  it.each([
    ['a lot that expired after it was chosen', { expires_on: '2026-11-16' }, 'expired-lot'],
    ['a lot that was blocked after it was chosen', { state: 'blocked', blocked_reason: 'Complaint' }, 'blocked-lot'],
  ])('is kept from %s', async (_what, change, code) => {
    const shop = await makeShop(work.admin)
    const id = await draft({}, shop)
    await work.admin('lots').where({ id: shop.lots.base }).update(change)
    expect(await sealBatch(work.asSystem(), { draftId: id })).toMatchObject({ review: [code], reviewOpen: true })
    expect(await stock(shop.lots.base, work.admin)).toBe('3550.0000')
  })

  it('needs no review of a lot that a foreman approved', async () => {
    const shop = await makeShop(work.admin)
    shop.lots.base = await makeLot(work.admin, shop.materials.base, '3000', { expires_on: '2026-11-16' })
    const approvals = [await makeApproval(work.admin, shop, 'use-expired-lot', `lot:${shop.lots.base}`, morning)]
    const id = await draft({ components: poured(shop, inTolerance, -1), approvals }, shop)
    expect((await sealBatch(work.asSystem(), { draftId: id })).review).toEqual([])
  })

  it('is kept unfinished, and in the wrong order', async () => {
    expect((await sealed({ components: poured(work.shop, ['1450', '725', null]) })).review).toEqual(['not-complete'])
    const [base, hardener, thinner] = poured(work.shop, inTolerance) ?? []
    if (base?.pours[0]) base.pours[0].at = minutesIn(-1)
    expect((await sealed({ components: [base, hardener, thinner].flatMap((one) => one ?? []) })).review).toEqual(['not-mixed-in-order'])
  })

  it('is kept when it arrives more than a week late', async () => {
    const week = 7 * 24 * 60
    const late = await sealed({ components: poured(work.shop, inTolerance, -week - 20), reactiveAt: minutesIn(-week - 19) })
    expect(late).toMatchObject({ review: ['late-entry'], state: 'life-up', reactiveAt: minutesIn(-week - 19) })
    expect((await sealed({ components: poured(work.shop, inTolerance, -week + 20) })).review).toEqual([])
  })

  it('is kept from a tablet whose clock was far ahead', async () => {
    const batch = await sealed({ reactiveAt: minutesIn(90), components: poured(work.shop, inTolerance, 90) })
    expect(batch).toMatchObject({ review: ['clock-ahead'], reactiveAt: minutesIn(0), mixedAt: minutesIn(0) })
  })
})

describe('a batch that cannot be', () => {
  it('has no draft', async () => {
    await expect(seal(randomUUID())).rejects.toMatchObject({ status: 404 })
  })
  it('has nothing in its cup', async () => {
    await expect(sealed({ components: [] })).rejects.toMatchObject({ status: 422, code: 'nothing-poured' })
  })
  it('has grams below nothing, however they got into the draft', async () => {
    const id = await draft()
    const { body } = await work.admin('batch_drafts').where({ id }).first<{ body: string }>('body')
    await work.admin('batch_drafts').where({ id }).update({ body: body.replace('"1450"', '"-1450"') })
    await expect(seal(id)).rejects.toMatchObject({ status: 422, code: 'negative-grams' })
  })
  it('is another sprayer\'s', async () => {
    const id = await draft({ mixedByUserId: work.shop.users.foreman })
    await expect(seal(id)).rejects.toMatchObject({ status: 403 })
  })
})

describe('a mix that was stopped', () => {
  const stopped = { at: minutesIn(-2), reason: 'Wrong hardener on the scale' }

  it('leaves the shop by the chemistry of what is in the cup where nobody says how', async () => {
    const batch = await sealed({ components: poured(work.shop, ['1450', null, null]), stopped })
    expect(batch.stopped).toMatchObject({ disposal: 'solvent-waste' })
    expect(await rows('waste_entries', { batch_id: batch.id })).toMatchObject([{ disposal: 'solvent-waste' }])
    const named = await sealed({ components: poured(work.shop, ['1450', '100', null]), stopped: { ...stopped, disposal: 'Taken back by the maker' } })
    expect(await rows('waste_entries', { batch_id: named.id })).toMatchObject([{ disposal: 'Taken back by the maker' }])
  })

  it('is recorded as stopped, with what was in the cup as waste', async () => {
    const shop = await makeShop(work.admin)
    const id = await draft({ components: poured(shop, ['1450', '100', null]), stopped }, shop)
    const batch = await sealBatch(work.asSystem(), { draftId: id })
    expect(batch).toMatchObject({ outcome: 'stopped', state: 'stopped', review: [], closedAt: minutesIn(-2), outOfTolerance: false, stopped })
    expect(await rows('waste_entries', { batch_id: id })).toMatchObject([{ kind: 'stopped-mix', grams: '1550.0000', weighed: 1, reason: stopped.reason, chemistry: 'polyurethane', disposal: 'open-metal-can' }])
    expect(await stock(shop.lots.base, work.admin)).toBe('3550.0000')
    expect(await rows('batch_drafts', { id })).toMatchObject([{ state: 'stopped' }])
    expect(await rows('job_steps', { id: shop.jobStepId })).toMatchObject([{ state: 'to-come' }])
  })

  it('rings no more', async () => {
    const id = await draft({ components: poured(work.shop, ['1450', '100', null]), stopped })
    expect(await rows('timers', { subject_id: id, state: 'waiting' })).toHaveLength(2)
    await seal(id)
    expect(await rows('timers', { subject_id: id, state: 'cancelled' })).toHaveLength(2)
  })

  it('wastes nothing when the cup was empty', async () => {
    const batch = await sealed({ components: [], stopped })
    expect(batch).toMatchObject({ state: 'stopped', pouredTotalG: '0', mixedAt: minutesIn(-2) })
    expect(await rows('waste_entries', { batch_id: batch.id })).toEqual([])
  })
})

describe('the ledger behind it all', () => {
  it('is whole after everything above', async () => {
    expect(await verifyChain(work.db)).toMatchObject({ ok: true, firstBadSeq: null })
  })
})
