import type { Knex } from 'knex'
import { principalName, type Context, type Idempotency } from './context'
import { ruleBroken } from './errors'
import { toInstant } from './rows'
import { isDuplicate } from './transactions'

interface StoredAnswer {
  answer: unknown
}

/**
 * Claims the key for this transaction, or finds what was answered under it. A second request with the same key
 * waits on the first one's row until that has committed or rolled back.
 *
 * @returns the stored answer, or null when the key is ours now
 * @throws Refusal 422 `idempotency-key-reused` when the body differs
 */
export async function replayOrClaim(
  trx: Knex.Transaction,
  ctx: Pick<Context, 'principal'>,
  claim: Idempotency,
  now: number,
): Promise<StoredAnswer | null> {
  const key = { principal: principalName(ctx.principal), route: claim.route, idempotency_key: claim.key }
  try {
    await trx('idempotency_keys').insert({ ...key, body_hash: claim.bodyHash, created_at: toInstant(now) })
    return null
  } catch (error) {
    if (!isDuplicate(error)) throw error
  }
  const row = await trx('idempotency_keys').where(key).first<{ body_hash: string; answer: string | null }>('body_hash', 'answer')
  if (!row?.answer) throw new Error('an idempotency key was committed without its answer')
  if (row.body_hash !== claim.bodyHash) {
    throw ruleBroken('idempotency-key-reused', 'This key was used for another request.')
  }
  return { answer: JSON.parse(row.answer) }
}

/** Stores what is answered, in the transaction that did it. */
export async function completeIdempotency(
  trx: Knex.Transaction,
  ctx: Pick<Context, 'principal'>,
  claim: Idempotency,
  answer: unknown,
): Promise<void> {
  await trx('idempotency_keys')
    .where({ principal: principalName(ctx.principal), route: claim.route, idempotency_key: claim.key })
    .update({ status: claim.status, answer: JSON.stringify(answer ?? null) })
}
