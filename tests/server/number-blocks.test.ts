import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { DraftInput } from '#shared/schemas/drafts'
import type { NumberBlock } from '#shared/schemas/number-blocks'
import { getBatch, sealBatch } from '../../server/services/batches'
import { saveDraft } from '../../server/services/drafts'
import { takeBlock, voidBlock } from '../../server/services/number-blocks'
import type { Context, DevicePrincipal } from '../../server/utils/context'
import { draftBody, morning, poured } from '../factories/drafts'
import { idempotency, openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

/** A bench that nobody has used yet. */
async function newBench(): Promise<DevicePrincipal> {
  const [id, at] = [randomUUID(), new Date(morning)]
  const tokenHash = (randomUUID() + randomUUID()).replaceAll('-', '')
  await work.admin('devices').insert({ id, kind: 'bench', name: `Bench ${id}`, booth_id: null, scale_id: null, token_hash: tokenHash, created_at: at, updated_at: at })
  return { id, kind: 'bench', name: `Bench ${id}`, boothId: null, scaleId: null }
}

/** The bench alone, as after a restart. */
const alone = (device: DevicePrincipal): Context => ({ ...work.asBench(), principal: { kind: 'device', user: null, device } })
/** The sprayer signed in at the bench. */
function signedInAt(device: DevicePrincipal): Context {
  const context = work.as('sprayer')
  if (context.principal.kind !== 'user') throw new Error('the sprayer is not signed in')
  return { ...context, principal: { ...context.principal, device } }
}

const save = (device: DevicePrincipal, code: string | undefined, id: string = randomUUID(), more: Partial<DraftInput> = {}) =>
  saveDraft(signedInAt(device), id, draftBody(work.shop, { ...more, ...(code === undefined ? {} : { code }) }))
const codeAt = (block: NumberBlock, place: number): string => {
  const code = block.codes[place]
  if (code === undefined) throw new Error(`the block has no free code at ${place}`)
  return code
}
const auditsOf = (block: NumberBlock) => work.admin('audit_entries').where({ subject: `number-block:${block.id}` }).orderBy('seq').pluck<string[]>('action')
const voidedOf = ({ firstNumber, lastNumber }: NumberBlock) =>
  work.admin('voided_numbers').whereBetween('number', [firstNumber, lastNumber]).orderBy('number').select<{ number: number; reason: string; user_id: string }[]>('number', 'reason', 'user_id')
const notYours = { status: 422, code: 'code-not-yours' }

describe('a block of numbers', () => {
  it('is twenty numbers of the series, which goes on after them', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    expect(block).toMatchObject({ series: 'batch', prefix: 'B-', lastNumber: block.firstNumber + 19, nextNumber: block.firstNumber })
    expect(block.codes).toEqual(Array.from({ length: 20 }, (_, index) => `B-${String(block.firstNumber + index).padStart(4, '0')}`))
    expect(await auditsOf(block)).toEqual(['number-block.taken'])
    expect((await takeBlock(alone(await newBench()))).firstNumber).toBe(block.lastNumber + 1)
    expect(Number((await save(bench, undefined)).code.slice(2))).toBe(block.lastNumber + 21)
  })

  it('stays the bench\'s until it is used up, with or without a person', async () => {
    const bench = await newBench()
    const block = await takeBlock(signedInAt(bench))
    expect(await takeBlock(alone(bench))).toEqual(block)
    expect(await auditsOf(block)).toHaveLength(1)
    await save(bench, codeAt(block, 19))
    const next = await takeBlock(alone(bench))
    expect(next.id).not.toBe(block.id)
    expect(next.firstNumber).toBeGreaterThan(block.lastNumber)
  })

  it('is one for each bench when two benches ask ten times at once', async () => {
    const benches = [await newBench(), await newBench()]
    const blocks = await Promise.all(Array.from({ length: 10 }, (_, index) => takeBlock(alone(benches[index % 2]!))))
    expect(new Set(blocks.map(({ id }) => id)).size).toBe(2)
    expect(new Set(blocks.flatMap(({ codes }) => codes)).size).toBe(40)
  })

  it('shares no number with batches that get theirs from the series at the same time', async () => {
    const benches = await Promise.all(Array.from({ length: 5 }, newBench))
    const [blocks, drafts] = await Promise.all([
      Promise.all(benches.map((bench) => takeBlock(alone(bench)))),
      Promise.all(benches.map((bench) => save(bench, undefined))),
    ])
    const codes = [...blocks.flatMap((block) => block.codes), ...drafts.map(({ code }) => code)]
    expect(codes).toHaveLength(105)
    expect(new Set(codes).size).toBe(105)
  })

  it('is answered again to the same key', async () => {
    const key = idempotency(randomUUID())
    const bench = await newBench()
    const first = await takeBlock({ ...alone(bench), idempotency: key })
    await save(bench, codeAt(first, 19))
    expect(await takeBlock({ ...alone(bench), idempotency: key })).toEqual(first)
  })

  it('is for benches only', async () => {
    for (const ctx of [work.as('sprayer'), work.as('manager'), work.asScreen()]) {
      await expect(takeBlock(ctx)).rejects.toMatchObject({ status: 422, code: 'not-a-bench' })
    }
  })
})

describe('a batch that names its code', () => {
  it('takes it from the bench\'s own block, which moves past it', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    expect((await save(bench, codeAt(block, 0))).code).toBe(codeAt(block, 0))
    expect(await takeBlock(alone(bench))).toMatchObject({ id: block.id, nextNumber: block.firstNumber + 1, codes: block.codes.slice(1) })
  })

  it('may arrive after a later one of the same bench', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    await save(bench, codeAt(block, 3))
    expect((await save(bench, codeAt(block, 1))).code).toBe(codeAt(block, 1))
    expect(await takeBlock(alone(bench))).toMatchObject({ nextNumber: block.firstNumber + 4, codes: block.codes.slice(4) })
  })

  it('keeps it: later steps name the same one or none', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    const [id, code] = [randomUUID(), codeAt(block, 0)]
    await save(bench, code, id, { seq: 1 })
    expect(await save(bench, code, id, { seq: 2 })).toMatchObject({ code, seq: 2 })
    expect(await save(bench, undefined, id, { seq: 3 })).toMatchObject({ code, seq: 3 })
    expect(await save(await newBench(), code, id, { seq: 4 })).toMatchObject({ code, seq: 4 })
    await expect(save(bench, codeAt(block, 1), id, { seq: 5 })).rejects.toMatchObject(notYours)
    expect((await takeBlock(alone(bench))).nextNumber).toBe(block.firstNumber + 1)
  })

  it('is one row when its first step is sent ten times at once', async () => {
    const bench = await newBench()
    const code = codeAt(await takeBlock(alone(bench)), 0)
    const [id, body] = [randomUUID(), draftBody(work.shop, { code })]
    const answers = await Promise.all(Array.from({ length: 10 }, () => saveDraft(signedInAt(bench), id, body)))
    expect(new Set(answers.map((answer) => answer.code))).toEqual(new Set([code]))
    expect(await work.admin('batch_drafts').where({ code })).toHaveLength(1)
  })

  it('is refused when two batches want the same one at once, but only one of them', async () => {
    const bench = await newBench()
    const code = codeAt(await takeBlock(alone(bench)), 0)
    const results = await Promise.allSettled([save(bench, code), save(bench, code)])
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1)
    expect(results.find(({ status }) => status === 'rejected')).toMatchObject({ reason: notYours })
    await expect(save(bench, code)).rejects.toMatchObject(notYours)
  })

  it('is refused one of another bench, one of no block, another spelling, and any without a bench', async () => {
    const [bench, other] = [await newBench(), await newBench()]
    const block = await takeBlock(alone(bench))
    const code = codeAt(block, 0)
    await expect(save(other, code)).rejects.toMatchObject({ ...notYours, fields: [{ path: 'code' }] })
    await expect(save(bench, 'B-999999999')).rejects.toMatchObject(notYours)
    await expect(save(bench, `B-0${code.slice(2)}`)).rejects.toMatchObject(notYours)
    await expect(saveDraft(work.as('manager'), randomUUID(), draftBody(work.shop, { code }))).rejects.toMatchObject(notYours)
    expect((await takeBlock(alone(bench))).codes).toEqual(block.codes)
  })

  it('bears it in the log too', async () => {
    const bench = await newBench()
    const [id, code] = [randomUUID(), codeAt(await takeBlock(alone(bench)), 2)]
    await save(bench, code, id, { components: poured(work.shop, ['145', '72.5', '29']) })
    await sealBatch(signedInAt(bench), { draftId: id })
    expect((await getBatch(work.as('sprayer'), id)).code).toBe(code)
  })
})

describe('voiding a block', () => {
  it('leaves no unused number, skipped ones included, and says who and why', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    await save(bench, codeAt(block, 0))
    await save(bench, codeAt(block, 3))
    const closed = await voidBlock(work.as('foreman'), block.id, { reason: 'The tablet fell into the thinner' })
    expect(closed).toMatchObject({ id: block.id, nextNumber: block.lastNumber + 1, codes: [] })
    const voided = await voidedOf(block)
    const expected = block.codes.filter((_, place) => place !== 0 && place !== 3).map((code) => Number(code.slice(2)))
    expect(voided.map(({ number }) => number)).toEqual(expected)
    expect(voided[0]).toMatchObject({ reason: 'The tablet fell into the thinner', user_id: work.shop.users.foreman })
    expect(await auditsOf(block)).toEqual(['number-block.taken', 'number-block.voided'])
  })

  it('closes it: no batch gets a voided code, and the bench gets another block', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    await voidBlock(work.as('manager'), block.id, { reason: 'Bench taken down' })
    await expect(save(bench, codeAt(block, 0))).rejects.toMatchObject(notYours)
    expect((await takeBlock(alone(bench))).firstNumber).toBeGreaterThan(block.lastNumber)
  })

  it('never voids the number of a batch that comes at the same moment', async () => {
    const bench = await newBench()
    const block = await takeBlock(alone(bench))
    const [saved] = await Promise.allSettled([save(bench, codeAt(block, 0)), voidBlock(work.as('foreman'), block.id, { reason: 'Bench taken down' })])
    const voided = (await voidedOf(block)).map(({ number }) => number)
    expect(voided.includes(block.firstNumber)).toBe(saved.status === 'rejected')
    expect(voided).toHaveLength(saved.status === 'rejected' ? 20 : 19)
  })

  it('says so when there is nothing to void, or no such block', async () => {
    const block = await takeBlock(alone(await newBench()))
    await voidBlock(work.as('foreman'), block.id, { reason: 'Bench taken down' })
    await expect(voidBlock(work.as('foreman'), block.id, { reason: 'Again' })).rejects.toMatchObject({ status: 422, code: 'nothing-to-void' })
    await expect(voidBlock(work.as('foreman'), randomUUID(), { reason: 'Never was' })).rejects.toMatchObject({ status: 404 })
  })
})
