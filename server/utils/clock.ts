import type { Knex } from 'knex'
import { firstRow } from './raw'

/** The one source of the present instant, in epoch milliseconds. */
export interface Clock {
  now(db: Knex | Knex.Transaction): Promise<number>
}

/** Name of the setting that moves the clock in tests, in milliseconds. Read only by `movableClock`. */
export const testClockSetting = 'test-clock-offset-ms'

/** The database's clock: the same for every process of the shop, whatever the hosts' clocks say. */
export const databaseClock: Clock = {
  async now(db) {
    return readInstant(db, 'SELECT UTC_TIMESTAMP(3) AS now')
  },
}

/** The database's clock moved by a setting, for tests that cannot wait for a pot's life to end. */
export const movableClock: Clock = {
  async now(db) {
    return readInstant(
      db,
      'SELECT UTC_TIMESTAMP(3) + INTERVAL COALESCE((SELECT CAST(value AS SIGNED) FROM settings WHERE name = ?), 0) * 1000 MICROSECOND AS now',
      [testClockSetting],
    )
  },
}

/** A clock that is told the time, for the demo's past. */
export function toldClock(read: () => number): Clock {
  return { now: async () => read() }
}

async function readInstant(db: Knex | Knex.Transaction, sql: string, bindings: string[] = []): Promise<number> {
  const { now } = await firstRow<{ now: Date }>(db, sql, bindings)
  return now.getTime()
}
