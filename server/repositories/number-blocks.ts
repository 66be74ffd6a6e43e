import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** Numbers of a series that one bench holds, first and last included. */
export interface StoredBlock {
  id: string
  series: string
  prefix: string
  deviceId: string
  firstNumber: number
  lastNumber: number
  /** The number after the highest used one; beyond the last when the block is used up or closed. */
  nextNumber: number
}

interface BlockRow {
  id: string
  series: string
  prefix: string
  device_id: string
  first_number: number
  last_number: number
  next_number: number
}

const columns = ['b.id', 'b.series', 's.prefix', 'b.device_id', 'b.first_number', 'b.last_number', 'b.next_number'] as const

const blocks = (db: Db) => db('number_blocks as b').join('number_series as s', 's.name', 'b.series')

const toStored = (row: BlockRow): StoredBlock => ({
  id: row.id,
  series: row.series,
  prefix: row.prefix,
  deviceId: row.device_id,
  firstNumber: row.first_number,
  lastNumber: row.last_number,
  nextNumber: row.next_number,
})

export async function findBlock(id: string, db: Db): Promise<StoredBlock | null> {
  const row = await blocks(db).where('b.id', id).first<BlockRow | undefined>(...columns)
  return row ? toStored(row) : null
}

/** The block with its row locked until the transaction ends. Only that row: whoever takes a number need not wait. */
export async function lockBlock(id: string, trx: Knex.Transaction): Promise<StoredBlock | null> {
  await trx('number_blocks').where({ id }).forUpdate().first('id')
  return findBlock(id, trx)
}

/** The device's first block that still has numbers. */
export async function findOpenBlock(series: string, deviceId: string, db: Db): Promise<StoredBlock | null> {
  const row = await blocks(db).where({ 'b.series': series, 'b.device_id': deviceId }).whereRaw('b.next_number <= b.last_number')
    .orderBy('b.first_number').first<BlockRow | undefined>(...columns)
  return row ? toStored(row) : null
}

/** The block of any device that holds this number. */
export async function findBlockOf(series: string, number: number, db: Db): Promise<StoredBlock | null> {
  const row = await blocks(db).where('b.series', series).where('b.first_number', '<=', number).where('b.last_number', '>=', number)
    .first<BlockRow | undefined>(...columns)
  return row ? toStored(row) : null
}

export async function insertBlock(block: Omit<StoredBlock, 'prefix'>, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('number_blocks').insert({
    id: block.id, series: block.series, device_id: block.deviceId, first_number: block.firstNumber, last_number: block.lastNumber,
    next_number: block.nextNumber, created_at: toInstant(now),
  })
}

export async function moveBlock(id: string, nextNumber: number, trx: Knex.Transaction): Promise<void> {
  await trx('number_blocks').where({ id }).update({ next_number: nextNumber })
}

/** Those of the codes that a batch bears, being made or made, other than the one with this id. */
export async function usedCodes(codes: readonly string[], exceptBatchId: string | null, db: Db): Promise<string[]> {
  const query = db('batch_drafts').whereIn('code', codes)
  if (exceptBatchId !== null) void query.whereNot({ id: exceptBatchId })
  return query.pluck<string[]>('code')
}

/** Numbers of the block that were voided. */
export async function voidedNumbers(block: Pick<StoredBlock, 'series' | 'firstNumber' | 'lastNumber'>, db: Db): Promise<number[]> {
  return db('voided_numbers').where({ series: block.series }).whereBetween('number', [block.firstNumber, block.lastNumber]).pluck<number[]>('number')
}

/** Why numbers will never be used, and who said so. */
export interface Voiding {
  series: string
  numbers: readonly number[]
  reason: string
  userId: string | null
}

export async function insertVoidedNumbers({ series, numbers, reason, userId }: Voiding, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('voided_numbers').insert(numbers.map((number) => ({ series, number, reason, user_id: userId, at: toInstant(now) })))
}
