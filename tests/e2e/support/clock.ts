import type { Knex } from 'knex'
import { testClockSetting } from '../../../server/utils/clock'

/** Moves the shop's clock on, for every process and over restarts. Only a server with the test clock heeds it. */
export async function advanceClock(admin: Knex, ms: number): Promise<void> {
  const row = await admin('settings').where({ name: testClockSetting }).first<{ value: string } | undefined>('value')
  const value = String(Number(row?.value ?? '0') + ms)
  const at = new Date()
  await admin('settings').insert({ name: testClockSetting, value, created_at: at, updated_at: at }).onConflict('name').merge(['value'])
}
