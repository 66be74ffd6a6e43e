import type { Knex } from 'knex'
import { firstRow } from '../utils/raw'

/** True when the database has had this migration. @param name its file name */
export async function hasMigration(name: string, db: Knex): Promise<boolean> {
  return (await db('knex_migrations').where({ name }).first('id')) !== undefined
}

/** The database's `innodb_flush_log_at_trx_commit`: `1` where each commit reaches the disk. */
export async function readFlushAtCommit(db: Knex): Promise<string> {
  const { value } = await firstRow<{ value: number | string }>(db, 'SELECT @@innodb_flush_log_at_trx_commit AS value')
  return String(value)
}
