import type { Knex } from 'knex'

/** Rows in which one of the columns holds the words, whatever their case. `%` and `_` mean themselves. */
export function whereContains(query: Knex.QueryBuilder, columns: readonly string[], words: string): void {
  const pattern = `%${words.replace(/[\\%_]/g, '\\$&')}%`
  void query.where((any) => {
    for (const column of columns) void any.orWhere(column, 'like', pattern)
  })
}
