import type { Knex } from 'knex'
import { windowState } from '#shared/engine/window-state'
import type { LiveWindow } from '#shared/schemas/live'
import { toMs } from '#shared/utils/instant'
import { findWindows, type OpenWindow, type WindowFilter } from '../repositories/windows'
import type { Mutation } from '../utils/transactions'
import { unendedWindows } from './unended-coats'

/** Windows that still count, as they stand at `now` (epoch milliseconds): of coats that are done, then of those being sprayed. */
export async function windowsAt(filter: Omit<WindowFilter, 'applicationId'>, now: number, db: Knex | Knex.Transaction): Promise<LiveWindow[]> {
  const windows = [...(await findWindows(filter, db)), ...(await unendedWindows(filter, now, db))]
  return windows.map((window) => toLiveWindow(window, now))
}

/** The window without what only the readiness rules need, with its state at `now` (epoch milliseconds). */
export function toLiveWindow(window: OpenWindow, now: number): LiveWindow {
  const { stepPosition: _position, pieceIds: _ids, ...shown } = window
  return { ...shown, state: stateOf(window, now) }
}

/** State of a window at `now`, epoch milliseconds. */
export function stateOf(window: Pick<OpenWindow, 'opensAt' | 'closingAt' | 'closesAt'>, now: number): LiveWindow['state'] {
  const opensAt = toMs(window.opensAt)
  const closesAt = window.closesAt === null ? null : toMs(window.closesAt)
  const closingAt = window.closingAt === null ? null : toMs(window.closingAt)
  return windowState({ opensAt, closesAt, closingAt, empty: closesAt !== null && closesAt <= opensAt }, now)
}

/** Tells the screens what the window is now; one that has ended is told as null. */
export async function publishWindow(m: Mutation, applicationId: string, boothId: string | null): Promise<void> {
  const [window] = await findWindows({ applicationId }, m.trx)
  m.publish({ type: 'window', subject: `application:${applicationId}`, boothId, payload: window ? toLiveWindow(window, m.now) : null })
}

/** Tells the screens the window of a coat whose last spray was not noted; null once it was, or where there is none. */
export async function publishUnended(m: Mutation, batchId: string, boothId: string | null): Promise<void> {
  const [window] = await unendedWindows({ batchId }, m.now, m.trx)
  m.publish({ type: 'window', subject: `batch:${batchId}`, boothId, payload: window ? toLiveWindow(window, m.now) : null })
}
