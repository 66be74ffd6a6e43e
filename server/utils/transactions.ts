import type { Knex } from 'knex'
import type { AuditEntry } from './audit'
import { appendLedger } from './audit'
import type { Context } from './context'
import { completeIdempotency, replayOrClaim } from './idempotency'

/** What becomes known to the screens when a transaction commits. */
export interface NewEvent {
  /** Kind of the event: a word of the API such as `pot` or `timer`. */
  type: string
  /** `kind:id` of what it is about. */
  subject: string
  /** Booth whose screens it concerns, or null for all. */
  boothId: string | null
  payload: unknown
}

/** The one transaction of a mutating request. */
export interface Mutation {
  trx: Knex.Transaction
  /** The clock's instant of this transaction, epoch milliseconds. */
  now: number
  /** States the one audit entry of this transaction; a second call is a programming error. */
  audit(entry: AuditEntry): void
  /** Queues an event; it gets its number at the end and is seen only after the commit. */
  publish(event: NewEvent): void
}

/** MariaDB: deadlock, lock wait timeout, record changed since last read. All pass when tried again. */
const retriable = new Set([1213, 1205, 1020])
const attempts = 6

/**
 * Runs `work` in one transaction, READ COMMITTED as every connection is, with its audit entry and events numbered in
 * commit order by the ledger's single row, which is locked last and held for a few statements only.
 * A request with an idempotency key gets the stored answer when the key was used before.
 *
 * @param work must use `mutation.trx` for every query and must be safe to run again after a rollback
 * @returns what `work` returned, or the answer stored under the same key
 * @throws Refusal from `work`; 422 when the key was used for another body
 */
export async function mutate<T>(ctx: Context, work: (mutation: Mutation) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await once(ctx, work)
    } catch (error) {
      if (attempt >= attempts || !isRetriable(error)) throw error
    }
  }
}

async function once<T>(ctx: Context, work: (mutation: Mutation) => Promise<T>): Promise<T> {
  let seq = 0
  const answer = await ctx.db.transaction(async (trx) => {
    const now = await ctx.clock.now(trx)
    if (ctx.idempotency) {
      const stored = await replayOrClaim(trx, ctx, ctx.idempotency, now)
      if (stored) return stored.answer as T
    }
    const entries: AuditEntry[] = []
    const events: NewEvent[] = []
    const result = await work({
      trx,
      now,
      audit: (entry) => void entries.push(entry),
      publish: (event) => void events.push(event),
    })
    const entry = entries[0]
    if (!entry || entries.length > 1) throw new Error(`a mutation writes one audit entry, not ${entries.length}`)
    if (ctx.idempotency) await completeIdempotency(trx, ctx, ctx.idempotency, result)
    seq = await appendLedger(trx, ctx, now, entry, events)
    return result
  })
  if (seq > 0) ctx.wake(seq)
  return answer
}

function isRetriable(error: unknown): boolean {
  return error instanceof Error && 'errno' in error && retriable.has(error.errno as number)
}

/** True for MariaDB's duplicate entry, the answer of a unique index. */
export function isDuplicate(error: unknown): boolean {
  return error instanceof Error && 'errno' in error && error.errno === 1062
}
