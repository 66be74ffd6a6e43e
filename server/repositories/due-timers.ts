import type { Knex } from 'knex'
import { msOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A pot whose life is up is called out again after this long, until somebody acknowledges. */
const announceAgainMs = 60_000

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
  return timers.where({ state: 'fired', kind: 'pot-up' }).where('announced_at', '<=', toInstant(now - announceAgainMs))
}

/** The next instant at which anything will be due, epoch milliseconds, or null when nothing waits. */
export async function nextDue(db: Db): Promise<number | null> {
  const [fire, announce, unmute] = await Promise.all([
    db('timers').where('state', 'waiting').min<{ at: Date | null }[]>('due_at as at').first(),
    db('timers').where({ state: 'fired', kind: 'pot-up' }).min<{ at: Date | null }[]>('announced_at as at').first(),
    db('timers').where({ state: 'acknowledged', kind: 'pot-up' }).min<{ at: Date | null }[]>('silenced_until as at').first(),
  ])
  const announced = msOrNull(announce?.at ?? null)
  const instants = [msOrNull(fire?.at ?? null), announced === null ? null : announced + announceAgainMs, msOrNull(unmute?.at ?? null)]
  const known = instants.filter((instant) => instant !== null)
  return known.length > 0 ? Math.min(...known) : null
}
