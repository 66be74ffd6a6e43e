import type { Knex } from 'knex'
import type { NumberBlock, NumberBlockVoidBody } from '#shared/schemas/number-blocks'
import {
  findBlock, findBlockOf, findOpenBlock, insertBlock, insertVoidedNumbers, lockBlock, moveBlock, usedCodes, voidedNumbers, type StoredBlock,
} from '../repositories/number-blocks'
import { lockSeries, moveSeries } from '../repositories/numbers'
import { userIdOf, type Context, type Principal } from '../utils/context'
import { notFound, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutateUnlessDone } from '../utils/settled'
import { mutate, type Mutation } from '../utils/transactions'
import { codeOf } from './numbers'

/** How many numbers a bench holds for work without network. */
const blockSize = 20

const series = 'batch'

const numbersOf = ({ firstNumber, lastNumber }: StoredBlock): number[] =>
  Array.from({ length: lastNumber - firstNumber + 1 }, (_, index) => firstNumber + index)

/** Numbers of the block that no batch bears and nobody voided. */
async function unusedNumbers(block: StoredBlock, db: Knex | Knex.Transaction): Promise<number[]> {
  const numbers = numbersOf(block)
  const used = new Set(await usedCodes(numbers.map((number) => codeOf(block.prefix, number)), null, db))
  const voided = new Set(await voidedNumbers(block, db))
  return numbers.filter((number) => !used.has(codeOf(block.prefix, number)) && !voided.has(number))
}

async function readBlock(id: string, db: Knex | Knex.Transaction): Promise<NumberBlock> {
  const block = await findBlock(id, db)
  if (!block) throw notFound('The block of numbers')
  const free = (await unusedNumbers(block, db)).filter((number) => number >= block.nextNumber)
  const { prefix, firstNumber, lastNumber, nextNumber } = block
  return { id, series: block.series, prefix, firstNumber, lastNumber, nextNumber, codes: free.map((number) => codeOf(prefix, number)) }
}

/**
 * The numbers that the asking bench holds for work without network: its block that still has some, or the next 20 of
 * the series. What the bench has given to batches that it has not sent yet is still among the free codes.
 *
 * @throws Refusal 422 `not-a-bench` when the asking browser is not enrolled as a bench
 */
export function takeBlock(ctx: Context): Promise<NumberBlock> {
  return mutateUnlessDone<NumberBlock>(ctx, async (m, keep) => {
    const { device } = ctx.principal
    if (device?.kind !== 'bench') throw ruleBroken('not-a-bench', 'Only a browser that is enrolled as a bench can hold numbers.')
    // The series is locked first: a bench that asks twice at once gets one block.
    const { next } = await lockSeries(series, m.trx)
    const open = await findOpenBlock(series, device.id, m.trx)
    if (open) keep(() => readBlock(open.id, ctx.db))
    const block = { id: newId(), series, deviceId: device.id, firstNumber: next, lastNumber: next + blockSize - 1, nextNumber: next }
    await moveSeries(series, next + blockSize, m.trx)
    await insertBlock(block, m.now, m.trx)
    const { firstNumber, lastNumber } = block
    m.audit({ action: 'number-block.taken', subject: `number-block:${block.id}`, facts: { series, deviceId: device.id, firstNumber, lastNumber } })
    return readBlock(block.id, m.trx)
  })
}

/**
 * Gives a new batch the code that its bench chose out of its own block. Numbers may arrive out of order.
 *
 * @throws Refusal 422 `code-not-yours` when the asking device does not hold it, another batch bears it or it was voided
 */
export async function claimCode(m: Mutation, principal: Principal, batchId: string, code: string): Promise<string> {
  const number = Number(/^B-(\d+)$/.exec(code)?.[1] ?? NaN)
  const found = Number.isSafeInteger(number) ? await findBlockOf(series, number, m.trx) : null
  const block = found && (await lockBlock(found.id, m.trx))
  // `B-00421` is another spelling of a number, not another number.
  if (!block || block.deviceId !== principal.device?.id || codeOf(block.prefix, number) !== code) throw notYours()
  if ((await usedCodes([code], batchId, m.trx)).length > 0 || (await voidedNumbers(block, m.trx)).includes(number)) throw notYours()
  await moveBlock(block.id, Math.max(block.nextNumber, number + 1), m.trx)
  return code
}

/** What is said of a code that a batch may not bear. */
export function notYours() {
  const message = 'This batch cannot have this code.'
  return ruleBroken('code-not-yours', message, [{ path: 'code', message }])
}

/**
 * Closes a block: each of its numbers that no batch bears is voided with the reason and will never be used.
 *
 * @throws Refusal 404, 422 `nothing-to-void` when every number is used or voided
 */
export function voidBlock(ctx: Context, id: string, { reason }: NumberBlockVoidBody): Promise<NumberBlock> {
  return mutate(ctx, async (m) => {
    const block = await lockBlock(id, m.trx)
    if (!block) throw notFound('The block of numbers')
    const numbers = await unusedNumbers(block, m.trx)
    if (numbers.length === 0) throw ruleBroken('nothing-to-void', 'Every number of this block is used or voided.')
    await insertVoidedNumbers({ series: block.series, numbers, reason, userId: userIdOf(ctx.principal) }, m.now, m.trx)
    await moveBlock(id, block.lastNumber + 1, m.trx)
    m.audit({ action: 'number-block.voided', subject: `number-block:${id}`, facts: { series: block.series, numbers } })
    return readBlock(id, m.trx)
  })
}
