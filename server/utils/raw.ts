import type { Knex } from 'knex'

/**
 * The first row of a statement that Knex has no builder for.
 *
 * @throws when there is none: use it only for statements that always answer
 */
export async function firstRow<T>(db: Knex | Knex.Transaction, sql: string, bindings: Knex.RawBinding[] = []): Promise<T> {
  const result = await db.raw<[T[], unknown]>(sql, bindings)
  const row = (result as [T[], unknown])[0][0]
  if (row === undefined) throw new Error('a statement answered no row')
  return row
}
