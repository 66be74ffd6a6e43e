import type { Knex } from 'knex'
import { databaseClock, toldClock } from '../../server/utils/clock'
import type { Context } from '../../server/utils/context'
import { newId } from '../../server/utils/ids'
import { seedReference } from '../reference'
import { History, type HistoryReport } from './history'
import { eraseUnfinished, markBegun, markDone, readDemoState } from './state'

/** The two connections of a seed: the admin erases and writes what nobody edits, the application's user does the rest. */
export interface Connections {
  admin: Knex
  app: Knex
}

/** What became of the wish for a demo shop. */
export type MakeOutcome = { made: true, rebuilt: boolean, report: HistoryReport } | { made: false, why: 'done' | 'foreign' }

/** Weeks of work that the demo shop has behind it. */
export const demoWeeks = 12

/**
 * Makes the demo shop in an empty database; one whose making was cut off is erased and made anew. A finished demo and
 * somebody's own shop are left alone.
 */
export async function makeDemo({ admin, app }: Connections, { weeks, say }: { weeks: number, say(line: string): void }): Promise<MakeOutcome> {
  const state = await readDemoState(admin)
  if (state === 'done' || state === 'foreign') return { made: false, why: state }
  if (state === 'unfinished') {
    say('The demo shop was cut off while it was made; it is made anew.')
    await eraseUnfinished(admin)
  }
  const now = await databaseClock.now(admin)
  await markBegun(admin, now)
  await seedReference(admin)
  let told = now
  const ctx: Context = { db: app, clock: toldClock(() => told), principal: { kind: 'system', user: null, device: null }, requestId: newId(), wake: () => undefined }
  const report = await History.run(ctx, { tell: (at) => void (told = at) }, { now, weeks, say })
  await markDone(admin, await databaseClock.now(admin))
  return { made: true, rebuilt: state === 'unfinished', report }
}
