import type { Knex } from 'knex'
import { hasMigration, readFlushAtCommit } from '../repositories/health'

/** What the health routes tell. */
export interface Health {
  ok: boolean
  /** Plain words for what is missing, where something is. */
  fault: string | null
}

/**
 * Whether the database answers and has all migrations of this build.
 *
 * @param lastMigration file name of the newest migration of this build
 */
export async function checkDatabase(db: Knex, lastMigration: string): Promise<Health> {
  try {
    return (await hasMigration(lastMigration, db)) ? { ok: true, fault: null } : { ok: false, fault: 'the database is not migrated to this version' }
  } catch {
    // Asked every few seconds by whoever watches: the answer is the word, a line in the log each time would be noise.
    return { ok: false, fault: 'the database does not answer' }
  }
}

/**
 * A commit that is only in memory is a promise that a power cut breaks: the server does not start on such a database.
 *
 * @throws when the database does not flush its log at each commit
 */
export async function demandDurableCommits(db: Knex): Promise<void> {
  if ((await readFlushAtCommit(db)) !== '1') {
    throw new Error('the database must run with innodb_flush_log_at_trx_commit=1, or batches are lost when it dies')
  }
}
