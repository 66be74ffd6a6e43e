import type { Knex } from 'knex'
import { newId } from '../utils/ids'
import { markShort, openLots, stockOf } from './lot-stock'

/** Grams that go back into a lot, or, below nothing, leave it after all. */
export interface Compensation {
  lotId: string
  grams: string
}

/**
 * Books what an amendment moves; what was booked before stays. A lot that gives after all is opened as by a pour, at
 * `pouredAt` of its lot, and one whose stock cannot be right is marked for counting.
 */
export async function compensateLots(
  moves: readonly Compensation[], batchId: string, userId: string, now: Date, pouredAt: (lotId: string) => Date, trx: Knex.Transaction,
): Promise<{ id: string; stockG: string }[]> {
  if (moves.length === 0) return []
  await trx('lot_movements').insert(moves.map(({ lotId, grams }) => ({
    id: newId(), lot_id: lotId, kind: 'compensation', grams, batch_id: batchId, user_id: userId, at: now, created_at: now,
  })))
  const taken = moves.filter(({ grams }) => grams.startsWith('-'))
  await openLots(taken.map(({ lotId }) => ({ lotId, at: pouredAt(lotId) })), now, trx)
  const stock = await stockOf(moves.map(({ lotId }) => lotId), trx)
  await markShort(stock, now, trx)
  return stock
}
