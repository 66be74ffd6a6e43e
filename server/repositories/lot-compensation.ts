import type { Knex } from 'knex'
import { newId } from '../utils/ids'
import { decimalOf } from '../utils/rows'

/** Grams that go back into a lot, or, below nothing, leave it after all. */
export interface Compensation {
  lotId: string
  grams: string
}

/** Books what an amendment moves; what was booked before stays. Marks lots whose stock cannot be right for counting. */
export async function compensateLots(
  moves: readonly Compensation[], batchId: string, userId: string, now: Date, trx: Knex.Transaction,
): Promise<{ id: string; stockG: string }[]> {
  if (moves.length === 0) return []
  await trx('lot_movements').insert(moves.map(({ lotId, grams }) => ({
    id: newId(), lot_id: lotId, kind: 'compensation', grams, batch_id: batchId, user_id: userId, at: now, created_at: now,
  })))
  const rows = await trx('lot_movements').whereIn('lot_id', moves.map(({ lotId }) => lotId)).groupBy('lot_id').orderBy('lot_id')
    .select<{ lot_id: string; stock: string }[]>('lot_id', trx.raw('SUM(grams) AS stock'))
  const stock = rows.map(({ lot_id: id, stock: grams }) => ({ id, stockG: decimalOf(grams) }))
  const short = stock.filter(({ stockG }) => stockG.startsWith('-')).map(({ id }) => id)
  if (short.length > 0) {
    await trx('lots').whereIn('id', short).where({ count_needed: false }).update({ count_needed: true, updated_at: now, version: trx.raw('version + 1') })
  }
  return stock
}
