import type { LiveSnapshot } from '#shared/schemas/live'
import type { TimerList, TimerListQuery } from '#shared/schemas/timers'
import { toMs } from '#shared/utils/instant'
import { audienceOf } from '../live/audience'
import { readHead } from '../repositories/events'
import { findPots } from '../repositories/pots'
import { readConsistent } from '../repositories/snapshot'
import { listAlarms, listTimers } from '../repositories/timers'
import type { Context } from '../utils/context'
import { decodeCursor, encodeCursor } from '../utils/keyset'
import { isoOf, toInstant } from '../utils/rows'
import { liveBooths } from './booth-view'
import { windowsAt } from './windows'

/**
 * Everything that runs in one booth or the shop, as it stood when event `lastSeq` had been committed: a stream from
 * `lastSeq` on continues it without gap or repeat.
 *
 * @throws Refusal 403 when a booth's screen asks for another booth
 */
export function readLive(ctx: Context, wanted: string | undefined): Promise<LiveSnapshot> {
  const { boothId } = audienceOf(ctx.principal, wanted)
  return readConsistent(ctx.db, async (trx) => {
    const lastSeq = await readHead(trx)
    const now = await ctx.clock.now(trx)
    return {
      serverNow: isoOf(toInstant(now)),
      lastSeq,
      boothId,
      pots: await findPots({ boothId, liveAt: now }, trx),
      windows: await windowsAt({ boothId }, now, trx),
      alarms: await listAlarms(boothId, trx),
      booths: await liveBooths(boothId, now, trx),
    }
  })
}

const running = ['waiting', 'fired', 'acknowledged'] as const

/** Timers by the instant they are due. A booth's screen sees those of its booth. */
export async function readTimers(ctx: Context, query: TimerListQuery): Promise<TimerList> {
  const { boothId } = audienceOf(ctx.principal, query.boothId)
  const [at, id] = query.cursor ? decodeCursor(query.cursor, ['instant', 'id']) : []
  const states = query.state === 'running' ? running : query.state && [query.state]
  const rows = await listTimers({
    boothId: boothId ?? undefined, kind: query.kind, states, limit: query.limit + 1,
    after: at === undefined ? undefined : { at: Number(at), id: String(id) },
  }, ctx.db)
  const items = rows.slice(0, query.limit)
  const last = rows.length > query.limit ? items.at(-1) : undefined
  return { items, nextCursor: last ? encodeCursor([toMs(last.dueAt), last.id]) : null }
}
