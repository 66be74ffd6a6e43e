import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { BatchList, BatchListQuery } from '#shared/schemas/batches'
import type { DraftInput } from '#shared/schemas/drafts'
import { closeBatch } from '../../server/services/batch-close'
import { recordBatchEvent } from '../../server/services/batch-events'
import { listBatches } from '../../server/services/batch-log'
import { sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { encodeCursor } from '../../server/utils/keyset'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { makeLot } from '../factories/shop'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
const ids: Record<string, string> = {}
const loose: Partial<DraftInput> = { jobStepId: null, pieceIds: [] }

/** Makes a batch whose pours end at the given minute and remembers it by its purpose. */
async function batch(purpose: string, minute: number, more: Partial<DraftInput> = {}) {
  const id = randomUUID()
  work.clock.now = morning + minute * 60_000
  await saveDraft(work.asSystem(), id, draftBody(work.shop, { components: poured(work.shop, ['1450', '725', '290'], minute - 2), purpose, ...more }))
  await sealBatch(work.asSystem(), { draftId: id })
  ids[purpose] = id
}

beforeAll(async () => {
  work = await openWorkshop()
  const second = await makeLot(work.admin, work.shop.materials.base, '3000')
  await batch('yesterday', -20 * 60, loose)
  await batch('of the job', 0)
  await batch('by the foreman', 10, { ...loose, mixedByUserId: work.shop.users.foreman })
  await batch('off the ratio', 20, { ...loose, components: poured(work.shop, ['1450', '800', '290'], 18) })
  await batch('from another tin', 30, { ...loose, components: [{ index: 0, pours: [{ lotId: second, grams: '500', at: minutesIn(30), source: 'typed', round: 0 }] }] })
  await batch('stopped', 40, { ...loose, stopped: { at: minutesIn(40), reason: 'Spilt' } })
  await batch('elsewhere', 50, { ...loose, boothId: work.shop.otherBoothId })
  await batch('plain', 60, { ...loose, mixRevisionId: work.shop.plainMixRevisionId, components: poured(work.shop, ['300', null, null], 58) })
  ids['second tin'] = second
  work.clock.now = morning + 100 * 60_000
  await closeBatch(work.asSystem(), ids['by the foreman'] ?? '', { leftoverG: '0', at: null })
  await recordBatchEvent(work.asSystem(), ids['yesterday'] ?? '', { kind: 'last-spray', gunId: null, at: null })
}, 180_000)
afterAll(() => work.close())

describe('the beginning of a lot\'s number', () => {
  it('is refused beside its field where more lots begin so than are looked up', async () => {
    const begins = `Z${work.shop.mark}`
    const lots = async (count: number) => {
      for (let one = 0; one < count; one++) await makeLot(work.admin, work.shop.materials.base, '1', { lot_number: `${begins}-${randomUUID().slice(0, 8)}` })
    }
    await lots(50)
    expect(await ask({ lot: begins })).toEqual([])
    await lots(1)
    await expect(ask({ lot: begins })).rejects.toMatchObject({ status: 400, fields: [{ path: 'lot', message: 'More than 50 lots begin so. Type more of the number.' }] })
  })
})

/** Purposes of the lines, in order. Every question is held to this shop by a component that all its batches share. */
async function ask(query: Record<string, string>): Promise<string[]> {
  const parsed = z.parse(BatchListQuery, { materialId: work.shop.materials.base, ...query })
  const list = await listBatches(work.as('sprayer'), parsed)
  expect(z.safeParse(BatchList, list).error).toBeUndefined()
  return list.items.map(({ id }) => Object.entries(ids).find(([, known]) => known === id)?.[0] ?? id)
}

const all = ['plain', 'elsewhere', 'stopped', 'from another tin', 'off the ratio', 'by the foreman', 'of the job', 'yesterday']

describe('the log', () => {
  it('shows the youngest first, by when a batch was mixed', async () => {
    expect(await ask({})).toEqual(all)
  })

  it.each<[string, () => Record<string, string>, string[]]>([
    ['a job', () => ({ jobId: work.shop.jobId }), ['of the job']],
    ['any component\'s material', () => ({ materialId: work.shop.materials.hardener }), all.filter((one) => one !== 'plain')],
    ['a lot', () => ({ lotId: ids['second tin'] ?? '' }), ['from another tin']],
    ['who mixed it', () => ({ mixedBy: work.shop.users.foreman }), ['by the foreman']],
    ['a booth', () => ({ boothId: work.shop.otherBoothId }), ['elsewhere']],
    ['its state', () => ({ state: 'emptied' }), ['by the foreman']],
    ['no pot life, because nothing reacts or nothing did yet', () => ({ state: 'no-pot-life' }), ['plain', 'from another tin']],
    ['deviations, stopped mixes and pots used late', () => ({ deviations: 'true' }), ['stopped', 'off the ratio', 'yesterday']],
    ['what waits for a foreman', () => ({ review: 'true' }), ['from another tin', 'off the ratio']],
    ['the first day', () => ({ from: '2026-11-17' }), all.slice(0, -1)],
    ['the last day, that day included', () => ({ to: '2026-11-16' }), ['yesterday']],
    ['several things at once', () => ({ review: 'true', lotId: ids['second tin'] ?? '', from: '2026-11-17', to: '2026-11-17' }), ['from another tin']],
    ['what nothing fits', () => ({ state: 'emptied', deviations: 'true' }), []],
  ])('is filtered by %s', async (_what, query, expected) => {
    expect(await ask(query())).toEqual(expected)
  })

  it.each<[string, Record<string, string>]>([['in the order of the record', {}], ['in the order of the state', { review: 'false' }]])('turns its pages %s without gap or repeat', async (_order, query) => {
    const whole = await ask(query)
    const pages: string[] = []
    let cursor: string | null = null
    do {
      const parsed = z.parse(BatchListQuery, { materialId: work.shop.materials.base, ...query, limit: '2', ...(cursor ? { cursor } : {}) })
      const list = await listBatches(work.as('sprayer'), parsed)
      expect(list.items.length).toBeLessThanOrEqual(2)
      pages.push(...list.items.map(({ purpose }) => purpose ?? ''))
      cursor = list.nextCursor
    } while (cursor !== null)
    expect(pages).toEqual(whole)
    expect(whole.length).toBeGreaterThan(4)
  })

  it('names what a line shows', async () => {
    const parsed = z.parse(BatchListQuery, { jobId: work.shop.jobId })
    const [line] = (await listBatches(work.as('sprayer'), parsed)).items
    const { mark } = work.shop
    expect(line).toMatchObject({
      jobCode: `J-${mark}`, stepTitle: 'Sealer', baseCode: `B-${mark}`, mixCode: `M-${mark}`, mixedByName: `sprayer ${mark}`, boothName: `Booth ${mark}`,
      gunName: `Gun ${mark}`, pouredTotalG: '2465', targetTotalG: '2460', worstDeviationPct: '0',
    })
  })

  it('asks the database the same number of times however long it is', async () => {
    const asked: string[] = []
    const listen = ({ sql }: { sql: string }) => void asked.push(sql)
    work.db.on('query', listen)
    await ask({ limit: '1' })
    const short = asked.length
    await ask({ limit: '200' })
    work.db.off('query', listen)
    expect(asked.length).toBe(2 * short)
    expect(asked.filter((sql) => sql.includes('batches'))).toHaveLength(2)
  })

  it.each(['nonsense', encodeCursor(['2026', 'x']), encodeCursor([9e15, randomUUID()]), encodeCursor([0, '\' OR 1 = 1'])])('refuses a cursor that is none: %s', async (cursor) => {
    await expect(ask({ cursor })).rejects.toMatchObject({ status: 400, fields: [{ path: 'cursor' }] })
  })

  it('is that of its booth on a booth\'s screen', async () => {
    const query = z.parse(BatchListQuery, { materialId: work.shop.materials.base })
    const list = await listBatches(work.asScreen(work.shop.otherBoothId), query)
    expect(list.items.map(({ id }) => id)).toEqual([ids.elsewhere])
    await expect(listBatches(work.asScreen(work.shop.otherBoothId), { ...query, boothId: work.shop.boothId })).rejects.toMatchObject({ status: 403 })
  })
})
