import type { Knex } from 'knex'
import type { LivePot } from '#shared/schemas/live'
import { findPots } from '../repositories/pots'
import type { Mutation } from '../utils/transactions'

/**
 * A pot as the screens show it: an open draft, with or without its hardener, or a sealed batch with its effective values.
 *
 * @param batchId id of the batch, which is the id of its draft
 * @param options.fresh the batch was sealed in this transaction: no gun has done anything with it yet
 * @returns null when there is neither draft nor batch
 */
export async function potView(db: Knex | Knex.Transaction, batchId: string, { fresh = false } = {}): Promise<LivePot | null> {
  const [pot] = await findPots({ batchId, fresh }, db)
  return pot ?? null
}

/**
 * Tells the screens what the pot is now, as this transaction leaves it. Call it last, after every write that touches
 * the pot; a pot that is gone is told as null.
 *
 * @param options.fresh the batch was sealed in this transaction
 */
export async function publishPot(m: Mutation, batchId: string, options: { fresh?: boolean } = {}): Promise<void> {
  const pot = await potView(m.trx, batchId, options)
  m.publish({ type: 'pot', subject: `batch:${batchId}`, boothId: pot?.boothId ?? null, payload: pot })
}
