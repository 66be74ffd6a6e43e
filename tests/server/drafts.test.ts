import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { DraftInput } from '#shared/schemas/drafts'
import { getDraft, listDrafts, saveDraft } from '../../server/services/drafts'
import { sealBatch } from '../../server/services/batches'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeApproval, makeLot, makeMaterial, makeMix, makeShop } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

const save = (more: Partial<DraftInput> = {}, id: string = randomUUID()) => saveDraft(work.as('sprayer'), id, draftBody(work.shop, more))
const timersOf = (id: string) =>
  work.admin('timers').where({ subject_id: id }).orderBy('kind').select<{ kind: string; due_at: Date; state: string }[]>('kind', 'due_at', 'state')

describe('a draft', () => {
  it('gets its code at the first save and keeps it', async () => {
    const id = randomUUID()
    const first = await save({ seq: 1 }, id)
    const second = await save({ seq: 2 }, id)
    expect(first.code).toMatch(/^B-\d{4,}$/)
    expect(second).toMatchObject({ code: first.code, seq: 2, state: 'open', reactiveAt: null, potLife: null, notes: [] })
    expect(await getDraft(work.as('foreman'), id)).toEqual(second)
  })

  it('gives neighbouring drafts neighbouring codes, also when ten start at once', async () => {
    const drafts = await Promise.all(Array.from({ length: 10 }, () => save()))
    const numbers = drafts.map(({ code }) => Number(code.slice(2))).sort((a, b) => a - b)
    expect(numbers).toEqual(numbers.map((_, index) => (numbers[0] ?? 0) + index))
  })

  it('answers the stored draft to a lower or equal step and audits nothing', async () => {
    const id = randomUUID()
    const stored = await save({ seq: 5, purpose: 'as stored' }, id)
    expect(await save({ seq: 5, purpose: 'sent again' }, id)).toEqual(stored)
    expect(await save({ seq: 4, purpose: 'overtaken' }, id)).toEqual(stored)
    expect(await work.admin('audit_entries').where({ subject: `batch:${id}` })).toHaveLength(1)
  })

  it('is one row when its first step is sent ten times at once', async () => {
    const id = randomUUID()
    const body = draftBody(work.shop)
    const answers = await Promise.all(Array.from({ length: 10 }, () => saveDraft(work.as('sprayer'), id, body)))
    expect(new Set(answers.map(({ code }) => code)).size).toBe(1)
    expect(await work.admin('audit_entries').where({ subject: `batch:${id}` })).toHaveLength(1)
  })

  it('is told to the screens of its booth as a pot being mixed', async () => {
    const id = randomUUID()
    const { code } = await save({ components: poured(work.shop, ['1450', null, null]) }, id)
    const event = await work.admin('events').where({ subject: `batch:${id}`, type: 'pot' }).first<{ booth_id: string; payload: string }>()
    expect(event.booth_id).toBe(work.shop.boothId)
    expect(JSON.parse(event.payload)).toMatchObject({ id, code, stage: 'mixing', pouredG: '1450', reactiveAt: null })
  })

  it('stands among the open ones of its booth until it is sealed', async () => {
    const id = randomUUID()
    const { code } = await save({ components: poured(work.shop, ['1450', '725', '290']) }, id)
    const open = await listDrafts(work.asBench(), { state: 'open', boothId: work.shop.boothId })
    expect(open.items.find((item) => item.id === id)).toMatchObject({ code, jobCode: `J-${work.shop.mark}`, stepTitle: 'Sealer' })
    await sealBatch(work.as('sprayer'), { draftId: id })
    const after = await listDrafts(work.asBench(), { state: 'open', boothId: work.shop.boothId })
    expect(after.items.some((item) => item.id === id)).toBe(false)
  })

  it('takes no further step once it is sealed', async () => {
    const id = randomUUID()
    const body = { components: poured(work.shop, ['1450', '725', '290']) }
    await save(body, id)
    await sealBatch(work.as('sprayer'), { draftId: id })
    await expect(save({ ...body, seq: 2 }, id)).rejects.toMatchObject({ status: 409, code: 'already-sealed' })
    expect((await save({ ...body, seq: 1 }, id)).state).toBe('sealed')
  })
})

describe('who may write a draft', () => {
  it('lets its mixer, a foreman and a manager', async () => {
    const id = randomUUID()
    await save({ seq: 1 }, id)
    const taken = await saveDraft(work.as('foreman'), id, draftBody(work.shop, { seq: 2, mixedByUserId: work.shop.users.foreman }))
    expect(taken.notes).toEqual(['taken-over'])
    const again = await saveDraft(work.as('manager'), id, draftBody(work.shop, { seq: 3, mixedByUserId: work.shop.users.foreman }))
    expect(again.seq).toBe(3)
  })

  it('refuses a sprayer who names another person, or goes on with another person\'s', async () => {
    const id = randomUUID()
    const foremans = draftBody(work.shop, { mixedByUserId: work.shop.users.foreman })
    await expect(saveDraft(work.as('sprayer'), id, foremans)).rejects.toMatchObject({ status: 403 })
    await saveDraft(work.as('foreman'), id, foremans)
    await expect(save({ seq: 2 }, id)).rejects.toMatchObject({ status: 403 })
  })

  it('lets a bench for someone who has signed in on it, and for nobody else', async () => {
    const { users, benchId } = work.shop
    const body = draftBody(work.shop)
    await expect(saveDraft(work.asBench(), randomUUID(), body)).rejects.toMatchObject({ status: 403 })
    const at = new Date(morning)
    await work.admin('sessions').insert({
      id: (randomUUID() + randomUUID()).replaceAll('-', ''), user_id: users.sprayer, device_id: benchId, created_at: at, last_seen_at: at, expires_at: at, ended_at: at,
    })
    expect(await saveDraft(work.asBench(), randomUUID(), body)).toMatchObject({ mixedByUserId: users.sprayer })
    await expect(saveDraft(work.asScreen(), randomUUID(), body)).rejects.toMatchObject({ status: 403 })
  })
})

describe('what a draft refers to', () => {
  const nowhere = '00000000-0000-4000-8000-000000000000'
  it.each([
    ['a mix', { mixRevisionId: nowhere }, 'mixRevisionId'],
    ['a scale', { scaleId: nowhere }, 'scaleId'],
    ['a booth', { boothId: nowhere }, 'boothId'],
    ['a gun', { gunId: nowhere }, 'gunId'],
    ['a step of a job', { jobStepId: nowhere, pieceIds: [] }, 'jobStepId'],
    ['pieces', { pieceIds: [nowhere] }, 'pieceIds'],
  ])('must be there: %s', async (_what, more, path) => {
    await expect(save(more)).rejects.toMatchObject({ status: 400, fields: [{ path }] })
  })

  it('is the mix that the step asks for', async () => {
    await expect(save({ mixRevisionId: work.shop.plainMixRevisionId })).rejects.toMatchObject({ status: 400, fields: [{ path: 'mixRevisionId' }] })
  })

  it('is pieces of the same job', async () => {
    const other = await makeShop(work.admin)
    await expect(save({ pieceIds: other.pieceIds })).rejects.toMatchObject({ status: 400, fields: [{ path: 'pieceIds' }] })
  })

  it('has a plan that can be, and for this mix', async () => {
    const { plan } = draftBody(work.shop)
    await expect(save({ plan: { ...plan, areaM2: '0' } })).rejects.toMatchObject({ name: 'EngineError', code: 'too-small', field: 'plan.areaM2' })
    const component = (parts: string) => ({ name: 'x', parts })
    const mix = { basis: 'weight' as const, components: [component('100'), component('25'), component('20')] }
    await expect(save({ plan: { ...plan, mix } })).rejects.toMatchObject({ status: 422, code: 'plan-not-the-mix' })
    mix.components[1] = component('50')
    expect((await save({ plan: { ...plan, mix } })).plan.mix).toEqual(mix)
  })
})

describe('what cannot be true is refused', () => {
  const one = (grams: string, lotId: string) => [{ index: 0, pours: [{ lotId, grams, at: minutesIn(-1), source: 'typed' as const, round: 0 }] }]
  it('grams below nothing', async () => {
    await expect(save({ components: one('-0.1', work.shop.lots.base) })).rejects.toMatchObject({ status: 422, code: 'negative-grams', fields: [{ path: 'components.0.pours.0.grams' }] })
  })
  it('a lot that was never booked in', async () => {
    await expect(save({ components: one('10', randomUUID()) })).rejects.toMatchObject({ status: 422, code: 'unknown-lot' })
  })
  it('a lot of another material', async () => {
    await expect(save({ components: one('10', work.shop.lots.hardener) })).rejects.toMatchObject({ status: 422, code: 'lot-of-other-material' })
  })
  it('more than the scale can hold', async () => {
    await expect(save({ components: one('8000.1', work.shop.lots.base) })).rejects.toMatchObject({ status: 422, code: 'over-scale' })
    expect((await save({ components: one('8000', work.shop.lots.base) })).seq).toBe(1)
  })
  it('a component that the mix has not', async () => {
    const components = [{ index: 5, pours: [] }]
    await expect(save({ components })).rejects.toMatchObject({ status: 422, code: 'unknown-component' })
  })
})

describe('a lot past its date or blocked', () => {
  const from = (lotId: string, minute = -1) => [{ index: 0, pours: [{ lotId, grams: '0', at: minutesIn(minute), source: 'typed' as const, round: 0 }] }]

  it('is refused before it is poured, with the way out', async () => {
    const expired = await makeLot(work.admin, work.shop.materials.base, '1000', { expires_on: '2026-11-16' })
    const blocked = await makeLot(work.admin, work.shop.materials.base, '1000', { state: 'blocked', blocked_reason: 'Complaint' })
    await expect(save({ components: from(expired) })).rejects.toMatchObject({ status: 422, code: 'lot-expired', message: expect.stringContaining('ask a foreman') })
    await expect(save({ components: from(blocked) })).rejects.toMatchObject({ status: 422, code: 'lot-blocked' })
  })

  it('may be used through its last day in the shop\'s zone', async () => {
    const last = await makeLot(work.admin, work.shop.materials.base, '1000', { expires_on: '2026-11-17' })
    expect((await save({ components: from(last) })).seq).toBe(1)
  })

  it('may be poured with an approval, which serves once', async () => {
    const lot = await makeLot(work.admin, work.shop.materials.base, '1000', { expires_on: '2026-11-16' })
    const approval = await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${lot}`, morning)
    const id = randomUUID()
    await save({ seq: 1, components: from(lot), approvals: [approval] }, id)
    work.clock.now = morning + 20 * 60_000
    expect((await save({ seq: 2, components: from(lot), approvals: [approval] }, id)).seq).toBe(2)
    await expect(save({ components: from(lot, 19), approvals: [approval] })).rejects.toMatchObject({ code: 'lot-expired' })
  })

  it('is not opened by an approval for another lot, for something else, or of long ago', async () => {
    const lot = await makeLot(work.admin, work.shop.materials.base, '1000', { expires_on: '2026-11-16' })
    const approvals = [
      await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${randomUUID()}`, morning),
      await makeApproval(work.admin, work.shop, 'use-blocked-lot', `lot:${lot}`, morning),
      await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${lot}`, morning - 3_600_000),
    ]
    await expect(save({ components: from(lot), approvals })).rejects.toMatchObject({ code: 'lot-expired' })
  })

  it('never: a peroxide past its date', async () => {
    const peroxide = await makeMaterial(work.admin, { code: `X-${randomUUID().slice(0, 8)}`, name: 'Peroxide', role: 'peroxide', chemistry: 'peroxide' })
    const lot = await makeLot(work.admin, peroxide, '500', { expires_on: '2026-11-16' })
    const { mixRevisionId } = await makeMix(work.admin, randomUUID().slice(0, 8), [
      [work.shop.materials.base, 'base', '100'], [peroxide, 'peroxide', '2', { tolerance_pct: '5', reactive: true }],
    ])
    const approvals = [await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${lot}`, morning)]
    const components = [{ index: 1, pours: [{ lotId: lot, grams: '0', at: minutesIn(-1), source: 'typed' as const, round: 0 }] }]
    await expect(save({ mixRevisionId, jobStepId: null, pieceIds: [], purpose: 'test', components, approvals }))
      .rejects.toMatchObject({ code: 'lot-expired', message: expect.stringContaining('No one can approve') })
  })

  it('is stored as a fact when it was poured a while ago without network', async () => {
    const lot = await makeLot(work.admin, work.shop.materials.base, '1000', { expires_on: '2026-11-16' })
    expect((await save({ components: from(lot, -30) })).seq).toBe(1)
  })
})

describe('the moment at which the cup becomes reactive', () => {
  it('starts the pot\'s timers at once', async () => {
    const id = randomUUID()
    const draft = await save({ components: poured(work.shop, ['1450', null, null]), reactiveAt: minutesIn(-5) }, id)
    expect(draft.potLife).toEqual({ startsAt: minutesIn(-5), lateAt: minutesIn(85), endsAt: minutesIn(115), basis: 'sheet', potLifeMin: '120' })
    expect(await timersOf(id)).toEqual([
      { kind: 'pot-late', due_at: new Date(minutesIn(85)), state: 'waiting' },
      { kind: 'pot-up', due_at: new Date(minutesIn(115)), state: 'waiting' },
    ])
  })

  it('is seen by the server when the pours show it and nobody said so', async () => {
    const draft = await save({ components: poured(work.shop, ['1450', '725', null]) })
    expect(draft.reactiveAt).toBe(minutesIn(-9))
  })

  it('is hastened by warmth and never slowed by cold', async () => {
    const warm = await save({ reactiveAt: minutesIn(0), climate: { airC: '22', rhPct: '50' }, viscosity: { cup: 'din-4', seconds: '25', materialC: '30' } })
    expect(warm.potLife).toMatchObject({ endsAt: minutesIn(60), basis: 'rule', potLifeMin: '60' })
    const cold = await save({ reactiveAt: minutesIn(0), climate: { airC: '10', rhPct: '50' } })
    expect(cold.potLife).toMatchObject({ endsAt: minutesIn(120), basis: 'held' })
  })

  it('moves to an earlier moment but never to a later one', async () => {
    const id = randomUUID()
    await save({ seq: 1, reactiveAt: minutesIn(-5) }, id)
    expect((await save({ seq: 2, reactiveAt: minutesIn(-1) }, id)).reactiveAt).toBe(minutesIn(-5))
    expect((await save({ seq: 3, reactiveAt: null }, id)).reactiveAt).toBe(minutesIn(-5))
    expect((await save({ seq: 4, reactiveAt: minutesIn(-8) }, id)).reactiveAt).toBe(minutesIn(-8))
    expect((await timersOf(id))[1]?.due_at).toEqual(new Date(minutesIn(112)))
  })

  it('is nothing where nothing reacts', async () => {
    const id = randomUUID()
    const draft = await save({ mixRevisionId: work.shop.plainMixRevisionId, jobStepId: null, pieceIds: [], purpose: 'stain', reactiveAt: minutesIn(0) }, id)
    expect(draft).toMatchObject({ reactiveAt: null, potLife: null })
    expect(await timersOf(id)).toEqual([])
  })

  it.each([
    ['by the offset of a tablet that is an hour behind', -65, 3_600_000, 0, -5, []],
    ['by the offset of a tablet that is a day ahead', 1435, -86_400_000, 0, -5, []],
    ['by what the tablet showed when it sent, where no offset is known', -65, null, -60, -5, []],
    ['to now, with a note, when it lies a minute ahead', 1, 0, 0, 0, ['clock-ahead']],
    ['to now, with another note, when it lies an hour ahead', 60, 0, 0, 0, ['clock-far-ahead']],
  ])('is corrected %s', async (_how, readMinute, offsetMs, sentMinute, expected, notes) => {
    const device = { reactiveAt: minutesIn(readMinute), sentAt: minutesIn(sentMinute), offsetMs }
    const draft = await save({ reactiveAt: minutesIn(-3), device })
    expect(draft).toMatchObject({ reactiveAt: minutesIn(expected), notes })
  })
})
