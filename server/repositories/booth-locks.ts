import type { Knex } from 'knex'

/**
 * Holds booths until the transaction ends, in the order of their ids. Before the first row is written that refers to
 * one of them: a reference holds its booth too, and two who hold it so would wait for each other.
 */
export async function lockBooths(ids: readonly (string | null)[], trx: Knex.Transaction): Promise<void> {
  const named = [...new Set(ids)].filter((id) => id !== null)
  if (named.length > 0) await trx('booths').whereIn('id', named).orderBy('id').forUpdate().select('id')
}

/** Keeps others from locking a booth until the transaction ends; any number may do so at once. */
export async function shareBooth(id: string, trx: Knex.Transaction): Promise<void> {
  await trx('booths').where({ id }).forShare().select('id')
}
