import type { Knex } from 'knex'
import { deleteKeysBefore, deleteLimitsBefore, deleteSessionsBefore } from '../repositories/housekeeping'

const dayMs = 86_400_000

/** A request may be sent again for a week; its key is kept for longer, so that nobody has to hurry. */
export const keyDays = 30

/** How long a session that ran out is still there to be looked at. */
export const sessionDays = 90

/** Counts of wrong passwords are kept by the server's own clock, which may differ from the database's. */
const limitDays = 1

/** Rows of one statement, and statements of one turn: nobody waits behind a long delete. */
const page = 500
const mostPages = 20

/**
 * Takes away what nobody needs any more: old idempotency keys, sessions long over, spent counts of wrong passwords.
 * The record and its events are never touched. Safe to run in several processes at once.
 *
 * @param now epoch milliseconds
 * @returns how many rows went
 */
export async function tidyUp(db: Knex, now: number): Promise<number> {
  return await drain(db, (trx) => deleteKeysBefore(now - keyDays * dayMs, page, trx))
    + await drain(db, (trx) => deleteSessionsBefore(now - sessionDays * dayMs, page, trx))
    + await drain(db, (trx) => deleteLimitsBefore(now - limitDays * dayMs, page, trx))
}

/** Under READ COMMITTED, the level of every connection, a delete locks the rows that it takes and no gap that somebody wants to write into. */
async function drain(db: Knex, step: (trx: Knex.Transaction) => Promise<number>): Promise<number> {
  let gone = 0
  for (let turn = 0; turn < mostPages; turn++) {
    const count = await db.transaction(step)
    gone += count
    if (count < page) break
  }
  return gone
}
