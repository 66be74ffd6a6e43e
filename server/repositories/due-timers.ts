import type { Knex } from 'knex'
import { msOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/**
 * A pot whose life is up is called out again until somebody acknowledges: first after this long, then each time after
 * as long again as it has been ringing. A pot forgotten over a weekend makes a dozen entries, not thousands.
 */
const announceAgainMs = 60_000

/** The instant of the next call, in SQL. */
const nextCall = `DATE_ADD(announced_at, INTERVAL GREATEST(${announceAgainMs * 1000}, TIMESTAMPDIFF(MICROSECOND, fired_at, announced_at)) MICROSECOND)`

/** `fire`: its instant has come. `announce`: nobody answered. `unmute`: the quiet is over and the pot still stands. */
type DueAction = 'fire' | 'announce' | 'unmute'

/** One timer and what is to be done about it. */
export interface DueWork {
  id: string
  action: DueAction
}

/** What is due at `now`, the longest overdue first. */
export async function findDue(now: number, limit: number, db: Db): Promise<DueWork[]> {
  const rows: DueWork[] = []
  for (const action of ['fire', 'announce', 'unmute'] as const) {
    const found = await dueBy(action, now, db).orderBy('due_at').limit(limit).select<{ id: string }[]>('id')
    rows.push(...found.map(({ id }) => ({ id, action })))
  }
  return rows
}

/** Locks the timer when it is still due and no other process holds it. */
export async function claimDue({ id, action }: DueWork, now: number, trx: Knex.Transaction): Promise<boolean> {
  const row = await dueBy(action, now, trx).where({ id }).forUpdate().skipLocked().first<{ id: string } | undefined>('id')
  return row !== undefined
}

function dueBy(action: DueAction, now: number, db: Db): Knex.QueryBuilder {
  const at = toInstant(now)
  const timers = db('timers')
  if (action === 'fire') return timers.where('state', 'waiting').where('due_at', '<=', at)
  if (action === 'unmute') return timers.where({ state: 'acknowledged', kind: 'pot-up' }).where('silenced_until', '<=', at)
  return timers.where({ state: 'fired', kind: 'pot-up' }).whereRaw(`${nextCall} <= ?`, [at])
}

/** The next instant at which anything will be due, epoch milliseconds, or null when nothing waits. */
export async function nextDue(db: Db): Promise<number | null> {
  const [fire, announce, unmute] = await Promise.all([
    db('timers').where('state', 'waiting').min<{ at: Date | null }[]>('due_at as at').first(),
    db('timers').where({ state: 'fired', kind: 'pot-up' }).select<{ at: Date | null }[]>(db.raw(`MIN(${nextCall}) AS at`)).first(),
    db('timers').where({ state: 'acknowledged', kind: 'pot-up' }).min<{ at: Date | null }[]>('silenced_until as at').first(),
  ])
  const instants = [fire, announce, unmute].map((row) => msOrNull(row?.at ?? null))
  const known = instants.filter((instant) => instant !== null)
  return known.length > 0 ? Math.min(...known) : null
}
