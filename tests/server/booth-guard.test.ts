import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { AmendmentBody } from '#shared/schemas/amendments'
import type { DraftInput } from '#shared/schemas/drafts'
import { amendBatch } from '../../server/services/amendments'
import { sealBatch } from '../../server/services/batches'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { rebuildBatches } from '../../server/services/batch-rebuild'
import { readBench } from '../../server/services/bench'
import { boothChemistry, cleanBooth } from '../../server/services/booth-guard'
import { saveDraft } from '../../server/services/drafts'
import { settleReview } from '../../server/services/reviews'
import { seedReference } from '../../seeds/reference'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeApproval, makeLot, makeMaterial, makeMix, makeShop, type Shop } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
let shop: Shop
let nitro: { mixRevisionId: string; lotId: string }
beforeAll(async () => {
  work = await openWorkshop('booth_guard')
  await seedReference(work.admin)
}, 120_000)
beforeEach(async () => {
  work.clock.now = morning
  shop = await makeShop(work.admin)
  Object.assign(work.shop, shop)
  const materialId = await makeMaterial(work.admin, { code: `N-${shop.mark}`, name: 'Nitro topcoat', role: 'base', chemistry: 'nitrocellulose' })
  const mix = await makeMix(work.admin, `${shop.mark}-N`, [[materialId, 'base', '100']], { pot_life_min: null, pot_life_reference_c: null })
  nitro = { mixRevisionId: mix.mixRevisionId, lotId: await makeLot(work.admin, materialId, '5000') }
})
afterAll(() => work.drop())

const sprayer = () => work.as('sprayer')
const ticked = { booth: true, duct: true, filters: true, approvalId: null } as const

/** A polyurethane pot in the record of this booth, ten minutes old. */
async function sprayPolyurethane(boothId = shop.boothId): Promise<string> {
  const id = randomUUID()
  await saveDraft(sprayer(), id, draftBody(shop, { boothId, components: poured(shop, ['1450', '725', '290']) }))
  await sealBatch(sprayer(), { draftId: id })
  return id
}
const nitroBody = (more: Partial<DraftInput> = {}) =>
  draftBody(shop, { mixRevisionId: nitro.mixRevisionId, jobStepId: null, purpose: 'sample', pieceIds: [], ...more })
const nitroIn = (minute: number): DraftInput['components'] =>
  [{ index: 0, pours: [{ lotId: nitro.lotId, grams: '2465', at: minutesIn(minute), source: 'typed', round: 0 }] }]

describe('the booth guard', () => {
  it('refuses to begin a mix for a booth that holds what it must not meet, and lets it begin for another booth', async () => {
    await sprayPolyurethane()
    await expect(saveDraft(sprayer(), randomUUID(), nitroBody())).rejects.toMatchObject({ status: 422, code: 'booth-clash' })
    expect((await saveDraft(sprayer(), randomUUID(), nitroBody({ boothId: shop.otherBoothId }))).state).toBe('open')
  })

  it('counts a pot that nobody sprayed yet, and none that was stopped', async () => {
    const id = randomUUID()
    const stopped = { at: minutesIn(0), reason: 'Spilled', disposal: 'reactive waste' }
    await saveDraft(sprayer(), id, draftBody(shop, { components: poured(shop, ['1450', '725', null]), stopped }))
    await sealBatch(sprayer(), { draftId: id })
    expect((await boothChemistry(sprayer(), shop.boothId)).past).toEqual([])
    await sprayPolyurethane()
    expect((await boothChemistry(sprayer(), shop.boothId)).past.map(({ chemistry }) => chemistry).sort()).toEqual(['polyurethane', 'solvent'])
  })

  it('is lifted by a recorded cleaning once the pots of the booth are emptied', async () => {
    const id = await sprayPolyurethane()
    work.clock.now = morning + 60 * 60_000
    await cleanBooth(work.as('foreman'), shop.boothId, ticked)
    // Cleaned around a pot that is still to be sprayed there.
    await expect(saveDraft(sprayer(), randomUUID(), nitroBody())).rejects.toMatchObject({ code: 'booth-clash' })
    await recordBatchEvent(sprayer(), id, { kind: 'last-spray', gunId: null, at: null })
    await closeBatch(sprayer(), id, { leftoverG: '0', at: null })
    work.clock.now += 60_000
    const after = await cleanBooth(work.as('foreman'), shop.boothId, ticked)
    expect(after).toMatchObject({ past: [], cleanedByName: `foreman ${shop.mark}` })
    expect((await saveDraft(sprayer(), randomUUID(), nitroBody())).state).toBe('open')
  })

  it('writes one audit entry a cleaning, with ids and no names', async () => {
    await cleanBooth(work.as('manager'), shop.boothId, ticked)
    const entries = await work.admin('audit_entries').where({ subject: `booth:${shop.boothId}` }).select<{ bytes: string }[]>('bytes')
    expect(entries).toHaveLength(1)
    const text = String(entries[0]?.bytes)
    expect(text).toContain('booth.cleaned')
    expect(text).toContain(shop.users.manager)
    expect(text).not.toContain(`manager ${shop.mark}`)
  })

  it('takes a sprayer\'s tap only with a foreman\'s word for this booth, once', async () => {
    await expect(cleanBooth(sprayer(), shop.boothId, ticked)).rejects.toMatchObject({ status: 422, code: 'foreman-needed' })
    const other = await makeApproval(work.admin, shop, 'clean-booth', `booth:${shop.otherBoothId}`, morning)
    await expect(cleanBooth(sprayer(), shop.boothId, { ...ticked, approvalId: other })).rejects.toMatchObject({ code: 'approval-invalid' })
    const approvalId = await makeApproval(work.admin, shop, 'clean-booth', `booth:${shop.boothId}`, morning)
    expect(await cleanBooth(sprayer(), shop.boothId, { ...ticked, approvalId })).toMatchObject({ cleanedByName: `foreman ${shop.mark}` })
    await expect(cleanBooth(sprayer(), shop.boothId, { ...ticked, approvalId })).rejects.toMatchObject({ code: 'approval-invalid' })
  })

  it('counts what is being mixed for the booth, and lets a cup change its own mix', async () => {
    const id = randomUUID()
    await saveDraft(sprayer(), id, draftBody(shop, { components: [] }))
    await expect(saveDraft(sprayer(), randomUUID(), nitroBody())).rejects.toMatchObject({
      status: 422, code: 'booth-clash', fields: [{ path: 'boothId', message: expect.stringContaining(`Sealer ${shop.mark} (polyurethane) is being mixed for Booth ${shop.mark}`) }],
    })
    expect((await saveDraft(sprayer(), id, nitroBody({ seq: 9 }))).mixRevisionId).toBe(nitro.mixRevisionId)
  })

  it('forgets an empty cup that nobody touched for a day, but none with something in it', async () => {
    const poured = randomUUID()
    await saveDraft(sprayer(), randomUUID(), draftBody(shop, { components: [] }))
    work.clock.now = morning + 25 * 3_600_000
    expect((await saveDraft(sprayer(), randomUUID(), nitroBody())).state).toBe('open')
    await saveDraft(sprayer(), poured, nitroBody({ boothId: shop.otherBoothId, components: nitroIn(0) }))
    work.clock.now += 25 * 3_600_000
    await expect(saveDraft(sprayer(), randomUUID(), draftBody(shop, { boothId: shop.otherBoothId, components: [] }))).rejects.toMatchObject({ code: 'booth-clash' })
  })

  it('keeps no booth for ever for a tin that was only named, nor for a cup that was stopped', async () => {
    const named = [{ index: 0, pours: [{ lotId: nitro.lotId, grams: '0', at: minutesIn(0), source: 'typed' as const, round: 0 }] }]
    await saveDraft(sprayer(), randomUUID(), nitroBody({ components: named }))
    const stopped = { at: minutesIn(0), reason: 'Spilled' }
    await saveDraft(sprayer(), randomUUID(), nitroBody({ boothId: shop.otherBoothId, components: nitroIn(0), stopped }))
    expect((await saveDraft(sprayer(), randomUUID(), draftBody(shop, { boothId: shop.otherBoothId, components: [] }))).state).toBe('open')
    await expect(saveDraft(sprayer(), randomUUID(), draftBody(shop, { components: [] }))).rejects.toMatchObject({ code: 'booth-clash' })
    work.clock.now = morning + 25 * 3_600_000
    expect((await saveDraft(sprayer(), randomUUID(), draftBody(shop, { components: [] }))).state).toBe('open')
  })

  it('asks anew for an empty cup that somebody goes on with after a day', async () => {
    const id = randomUUID()
    await saveDraft(sprayer(), id, nitroBody())
    work.clock.now = morning + 25 * 3_600_000
    await saveDraft(sprayer(), randomUUID(), draftBody(shop, { components: [] }))
    await expect(saveDraft(sprayer(), id, nitroBody({ seq: 2 }))).rejects.toMatchObject({ code: 'booth-clash' })
    const stopped = { at: minutesIn(25 * 60), reason: 'Forgotten' }
    expect((await saveDraft(sprayer(), id, nitroBody({ seq: 2, stopped }))).stopped).toMatchObject({ reason: 'Forgotten' })
  })

  it('marks a pot that an amendment puts into a booth where it clashes, until a foreman settles it', async () => {
    await sprayPolyurethane(shop.otherBoothId)
    const id = randomUUID()
    await saveDraft(sprayer(), id, nitroBody({ components: nitroIn(-5) }))
    expect((await sealBatch(sprayer(), { draftId: id })).review).toEqual([])
    const amend = (from: string, to: string) => amendBatch(work.as('foreman'), id, z.parse(AmendmentBody, { field: 'boothId', from, to, reason: 'Noted for the wrong booth' }))
    expect(await amend(shop.boothId, shop.otherBoothId)).toMatchObject({ boothId: shop.otherBoothId, review: ['booth-clash'], openReview: ['booth-clash'] })
    expect((await rebuildBatches(work.asSystem())).changed).toEqual([])
    work.clock.now += 60_000
    expect(await settleReview(work.as('foreman'), id, { codes: ['booth-clash'], reason: 'Booth and duct were washed' })).toMatchObject({ openReview: [] })
    work.clock.now += 60_000
    expect(await amend(shop.otherBoothId, shop.boothId)).toMatchObject({ review: [], openReview: [] })
    expect(await amend(shop.boothId, shop.otherBoothId)).toMatchObject({ openReview: ['booth-clash'] })
  })

  it('lets one of two clashing mixes begin when both do so at once', async () => {
    for (let round = 0; round < 5; round++) {
      Object.assign(shop, await makeShop(work.admin))
      Object.assign(work.shop, shop)
      const both = await Promise.allSettled([saveDraft(sprayer(), randomUUID(), draftBody(shop, { components: [] })), saveDraft(sprayer(), randomUUID(), nitroBody())])
      expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected'])
    }
  })

  it('marks one of two clashing pots that are sealed at once', async () => {
    for (let round = 0; round < 5; round++) {
      Object.assign(shop, await makeShop(work.admin))
      Object.assign(work.shop, shop)
      const [first, second] = [randomUUID(), randomUUID()]
      await saveDraft(sprayer(), first, draftBody(shop, { components: poured(shop, ['1450', '725', '290']) }))
      await saveDraft(sprayer(), second, nitroBody({ components: nitroIn(-5) }))
      const both = await Promise.all([first, second].map((draftId) => sealBatch(sprayer(), { draftId })))
      expect(both.filter(({ review }) => review.includes('booth-clash'))).toHaveLength(1)
    }
  })

  it('keeps what was poured all the same and marks it for a foreman', async () => {
    await sprayPolyurethane()
    const id = randomUUID()
    await saveDraft(sprayer(), id, nitroBody({ components: nitroIn(-5) }))
    const batch = await sealBatch(sprayer(), { draftId: id })
    expect(batch.review).toContain('booth-clash')
  })

  it('marks the one that arrives last, also where it was mixed first', async () => {
    await sprayPolyurethane()
    const id = randomUUID()
    await saveDraft(sprayer(), id, nitroBody({ components: nitroIn(-60) }))
    expect((await sealBatch(sprayer(), { draftId: id })).review).toContain('booth-clash')
  })

  it('goes to the bench with what lies in each booth and the rules, so that it guards without network', async () => {
    await sprayPolyurethane()
    const { booths, chemistryRules } = await readBench(sprayer())
    const booth = booths.find(({ id }) => id === shop.boothId)
    expect(booth?.past).toContainEqual({ chemistry: 'polyurethane', mixName: `Sealer ${shop.mark}`, at: minutesIn(-8) })
    expect(booths.find(({ id }) => id === shop.otherBoothId)?.past).toEqual([])
    expect(chemistryRules).toContainEqual(expect.objectContaining({ first: 'nitrocellulose', second: 'polyurethane', verdict: 'blocked' }))
  })
})
