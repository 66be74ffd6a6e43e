import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

/** What the log finds a batch by: the lots and materials that are in it. */
export interface BatchUses {
  batchId: string
  /** Epoch milliseconds. */
  mixedAt: number
  /** Ids of lots and of materials. */
  usedIds: readonly string[]
}

export async function insertUses({ batchId, mixedAt, usedIds }: BatchUses, trx: Knex.Transaction): Promise<void> {
  const rows = [...new Set(usedIds)].map((usedId) => ({ used_id: usedId, mixed_at: toInstant(mixedAt), batch_id: batchId }))
  if (rows.length > 0) await trx('batch_uses').insert(rows)
}

/** Makes the rows of one batch anew. */
export async function rewriteUses(uses: BatchUses, trx: Knex.Transaction): Promise<void> {
  await trx('batch_uses').where({ batch_id: uses.batchId }).delete()
  await insertUses(uses, trx)
}

/** How many lots a typed beginning may mean at once. */
export const mostLots = 50

/**
 * Lots by the maker's number: those that bear it exactly, else those whose number begins so.
 *
 * @returns null where more begin so than can be looked up at once
 */
export async function findLotsByNumber(lotNumber: string, db: Knex): Promise<string[] | null> {
  const exact = await db('lots').where('lot_number', lotNumber).orderBy('id').limit(mostLots + 1).select<{ id: string }[]>('id')
  if (exact.length > 0) return allOf(exact)
  const begins = `${lotNumber.replace(/[\\%_]/g, '\\$&')}%`
  const found = await db('lots').where('lot_number', 'like', begins).orderBy('lot_number').limit(mostLots + 1).select<{ id: string }[]>('id')
  return allOf(found)
}

const allOf = (found: readonly { id: string }[]): string[] | null => (found.length > mostLots ? null : found.map(({ id }) => id))
