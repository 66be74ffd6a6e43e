import type { Knex } from 'knex'

/**
 * Reads everything in `work` as it stood at one instant: one REPEATABLE READ transaction, whose view is made by its
 * first query and kept. Nothing is locked; `work` must not write.
 */
export function readConsistent<T>(db: Knex, work: (trx: Knex.Transaction) => Promise<T>): Promise<T> {
  return db.transaction(work, { isolationLevel: 'repeatable read' })
}
