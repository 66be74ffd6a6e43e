import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { DraftHolder, DraftInput } from '#shared/schemas/drafts'
import { sealBatch } from '../../server/services/batches'
import { getDraft, listDrafts, saveDraft } from '../../server/services/drafts'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeApproval, makeLot } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

const first: DraftHolder = { id: randomUUID(), turn: 0 }
const second: DraftHolder = { id: randomUUID(), turn: 1 }
const save = (id: string, more: Partial<DraftInput>) => saveDraft(work.as('sprayer'), id, draftBody(work.shop, more))
const cup = (grams: string) => poured(work.shop, [grams, '725', '290'])

describe('a batch that another tablet goes on with', () => {
  it('keeps the bench\'s own state as it was sent, for the one that goes on', async () => {
    const id = randomUUID()
    await save(id, { seq: 3, holder: first, bench: { stage: 'pour', place: 1, taredG: '0', walk: [{ kind: 'stir' }] } })
    expect(await getDraft(work.as('foreman'), id)).toMatchObject({ holder: first, bench: { stage: 'pour', place: 1, walk: [{ kind: 'stir' }] } })
  })

  it('is the second tablet\'s from its first step on; the first one is told where it is and changes nothing', async () => {
    const id = randomUUID()
    const { code } = await save(id, { seq: 3, holder: first, components: poured(work.shop, ['1450', null, null]) })
    await save(id, { seq: 4, holder: second, components: poured(work.shop, ['1450', '725', null]) })
    const late = save(id, { seq: 9, holder: first, components: cup('1999') })
    await expect(late).rejects.toMatchObject({ status: 409, code: 'taken-over', message: expect.stringContaining(`${code} was taken over`) as string })
    await expect(save(id, { seq: 2, holder: first })).rejects.toMatchObject({ code: 'taken-over' })
    expect((await getDraft(work.as('sprayer'), id)).components.flatMap(({ pours }) => pours.map(({ grams }) => grams))).toEqual(['1450', '725'])
  })

  it('is not sealed by a tablet that was taken over from, and once by the one that holds it', async () => {
    const id = randomUUID()
    await save(id, { seq: 3, holder: first, components: cup('1450') })
    await save(id, { seq: 4, holder: second, components: cup('1450') })
    await expect(sealBatch(work.as('sprayer'), { draftId: id, holder: first })).rejects.toMatchObject({ status: 409, code: 'taken-over' })
    const batch = await sealBatch(work.as('sprayer'), { draftId: id, holder: second })
    expect((await sealBatch(work.as('sprayer'), { draftId: id, holder: first })).id).toBe(batch.id)
    expect(await work.admin('batches').where({ id })).toHaveLength(1)
    await expect(save(id, { seq: 9, holder: first })).rejects.toMatchObject({ code: 'taken-over' })
  })

  it('goes to one of two tablets that take it over at once', async () => {
    const id = randomUUID()
    await save(id, { seq: 3, holder: first })
    const takers = [{ id: randomUUID(), turn: 1 }, { id: randomUUID(), turn: 1 }]
    const answers = await Promise.allSettled(takers.map((holder) => save(id, { seq: 4, holder })))
    expect(answers.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
  })

  it('may go back to the first tablet with the turn after', async () => {
    const id = randomUUID()
    await save(id, { seq: 3, holder: first })
    await save(id, { seq: 4, holder: second })
    expect((await save(id, { seq: 5, holder: { id: first.id, turn: 2 } })).seq).toBe(5)
    await expect(save(id, { seq: 6, holder: second })).rejects.toMatchObject({ code: 'taken-over' })
  })

  it('is listed with the tablet that holds it', async () => {
    const id = randomUUID()
    await save(id, { seq: 3, holder: second })
    const { items } = await listDrafts(work.asBench(), { state: 'open' })
    expect(items.find((item) => item.id === id)).toMatchObject({ holder: second, deviceName: null })
  })
})

describe('a foreman\'s word for a tin', () => {
  it('is taken when it is given, so that pouring may begin later than it lasts', async () => {
    const id = randomUUID()
    const lotId = await makeLot(work.admin, work.shop.materials.base, '3000', { expires_on: '2026-11-10' })
    const approvalId = await makeApproval(work.admin, work.shop, 'use-expired-lot', `lot:${lotId}`, morning)
    await save(id, { seq: 1, approvals: [approvalId] })
    work.clock.now = morning + 20 * 60_000
    const base = [{ index: 0, pours: [{ lotId, grams: '1450', at: minutesIn(20), source: 'typed' as const, round: 0 }] }]
    await save(id, { seq: 2, approvals: [approvalId], components: base })
    const rest = poured(work.shop, [null, '725', '290'], 20)
    await save(id, { seq: 3, approvals: [approvalId], components: [...base, ...(rest ?? [])] })
    expect((await sealBatch(work.as('sprayer'), { draftId: id })).review).toEqual([])
  })
})
