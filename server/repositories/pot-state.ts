import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

/** What a pot is to its timers: alive, or nothing left to ring for. */
export type PotFate = 'sealed' | 'draft' | 'over'

/** Looks the pot up and locks its state until the transaction ends. */
export async function lockPotFate(batchId: string, trx: Knex.Transaction): Promise<PotFate> {
  // The draft first: a batch that is being sealed at this moment has its row only after that.
  const draft = await trx('batch_drafts').where('id', batchId).forUpdate().first<{ state: string } | undefined>('state')
  const current = await trx('batch_current').where('batch_id', batchId).forUpdate().first<{ state: string } | undefined>('state')
  if (current) return ['fresh', 'closing', 'life-up'].includes(current.state) ? 'sealed' : 'over'
  return draft?.state === 'open' ? 'draft' : 'over'
}

/** Moves a sealed pot on; it never goes back. */
export async function advancePotState(batchId: string, state: 'closing' | 'life-up', now: number, trx: Knex.Transaction): Promise<void> {
  await trx('batch_current')
    .where('batch_id', batchId)
    .whereIn('state', state === 'closing' ? ['fresh'] : ['fresh', 'closing'])
    .update({ state, version: trx.raw('version + 1'), updated_at: toInstant(now) })
}
