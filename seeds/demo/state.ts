import type { Knex } from 'knex'
import { tables } from '../../server/database/tables'
import { toInstant } from '../../server/utils/rows'

/** How far the demo shop has come. `none`: the database holds no demo; `foreign`: it holds somebody's shop. */
export type DemoState = 'none' | 'foreign' | 'unfinished' | 'done'

const setting = 'demo-seed'

/** Reads what the database holds. */
export async function readDemoState(db: Knex): Promise<DemoState> {
  const row = await db('settings').where('name', setting).first<{ value: string } | undefined>('value')
  if (row) return JSON.parse(row.value) === 'done' ? 'done' : 'unfinished'
  return (await db('users').first('id')) === undefined ? 'none' : 'foreign'
}

/** Marks that a demo is being made, before anything of it is written. */
export async function markBegun(admin: Knex, now: number): Promise<void> {
  const born = { created_at: toInstant(now), updated_at: toInstant(now) }
  await admin('settings').insert([
    { name: 'demo', value: JSON.stringify(true), ...born },
    { name: setting, value: JSON.stringify('running'), ...born },
  ])
}

/** Marks that the demo is complete. */
export async function markDone(admin: Knex, now: number): Promise<void> {
  await admin('settings').where('name', setting)
    .update({ value: JSON.stringify('done'), version: admin.raw('version + 1'), updated_at: toInstant(now) })
}

/** Written by migrations: kept, and set back to their beginnings. */
const begun = {
  ledger_head: [{ id: 1, seq: 0, hash: '0'.repeat(64) }],
  number_series: [{ name: 'batch', prefix: 'B-', next_number: 1 }, { name: 'job', prefix: 'J-', next_number: 1 }],
}

/**
 * Empties every table, record included, and sets the ledger and the number series back. Only ever for a demo that was
 * never finished, in which nobody can have worked.
 *
 * @throws when the database holds anything else
 */
export async function eraseUnfinished(admin: Knex): Promise<void> {
  if ((await readDemoState(admin)) !== 'unfinished') throw new Error('only an unfinished demo is ever erased')
  const names = Object.values(tables).flat().filter((name) => !name.startsWith('knex_') && name !== 'settings')
  // One connection, since foreign keys are switched off for it alone. The mark goes last: cut off here, it begins again.
  await admin.transaction(async (trx) => {
    await trx.raw('SET FOREIGN_KEY_CHECKS = 0')
    try {
      for (const name of names) await trx(name).delete()
      for (const [name, rows] of Object.entries(begun)) await trx(name).insert(rows)
      await trx('settings').delete()
    } finally {
      await trx.raw('SET FOREIGN_KEY_CHECKS = 1')
    }
  })
}
