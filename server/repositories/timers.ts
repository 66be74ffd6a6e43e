import type { Knex } from 'knex'
import type { Timer, TimerKind, TimerState } from '#shared/schemas/timers'
import { newId } from '../utils/ids'
import { isoOf, isoOrNull, toInstant, toInstantOrNull } from '../utils/rows'

type Db = Knex | Knex.Transaction

interface TimerRow {
  id: string
  kind: TimerKind
  subject_type: Timer['subjectType']
  subject_id: string
  booth_id: string | null
  booth_name: string | null
  label: string
  due_at: Date
  state: TimerState
  fired_at: Date | null
  announced_at: Date | null
  silenced_until: Date | null
  silenced_by: string | null
  silenced_reason: string | null
  acknowledged_at: Date | null
  acknowledged_by: string | null
  created_at: Date
  version: number
}

function toTimer(row: TimerRow): Timer {
  return {
    id: row.id,
    kind: row.kind,
    subjectType: row.subject_type,
    subjectId: row.subject_id,
    boothId: row.booth_id,
    boothName: row.booth_name,
    label: row.label,
    dueAt: isoOf(row.due_at),
    state: row.state,
    firedAt: isoOrNull(row.fired_at),
    announcedAt: isoOrNull(row.announced_at),
    silencedUntil: isoOrNull(row.silenced_until),
    silencedBy: row.silenced_by,
    silencedReason: row.silenced_reason,
    acknowledgedAt: isoOrNull(row.acknowledged_at),
    acknowledgedBy: row.acknowledged_by,
    createdAt: isoOf(row.created_at),
    version: row.version,
  }
}

const select = (db: Db) =>
  db('timers as t').leftJoin('booths as b', 'b.id', 't.booth_id').select<TimerRow[]>('t.*', 'b.name as booth_name')

/** Instants are epoch milliseconds. */
export interface NewTimer {
  kind: TimerKind
  subjectType: Timer['subjectType']
  subjectId: string
  boothId: string | null
  label: string
  dueAt: number
  createdByUserId?: string | null
}

/**
 * Sets the one timer of each kind and subject, in the order given. One that stands for the same instant and was not
 * called off keeps what happened to it; one for another instant waits anew.
 */
export async function setTimers(timers: readonly NewTimer[], now: number, db: Db): Promise<void> {
  if (timers.length === 0) return
  const at = toInstant(now)
  // MariaDB assigns from left to right: due_at moves last, so that the others still see the old instant.
  const kept = (column: string, otherwise: string) =>
    `${column} = IF(due_at = VALUES(due_at) AND state NOT IN ('cancelled', 'done'), ${column}, ${otherwise})`
  await db.raw(
    `INSERT INTO timers (id, kind, subject_type, subject_id, booth_id, label, due_at, state, created_by_user_id, version, created_at, updated_at)
     VALUES ${timers.map(() => '(?, ?, ?, ?, ?, ?, ?, \'waiting\', ?, 1, ?, ?)').join(', ')}
     ON DUPLICATE KEY UPDATE ${kept('fired_at', 'NULL')}, ${kept('announced_at', 'NULL')}, ${kept('silenced_until', 'NULL')},
       ${kept('silenced_by', 'NULL')}, ${kept('silenced_reason', 'NULL')}, ${kept('acknowledged_at', 'NULL')}, ${kept('acknowledged_by', 'NULL')}, ${kept('state', '\'waiting\'')},
       booth_id = VALUES(booth_id), label = VALUES(label), due_at = VALUES(due_at), version = version + 1, updated_at = VALUES(updated_at)`,
    timers.flatMap(timer => [
      newId(), timer.kind, timer.subjectType, timer.subjectId, timer.boothId, timer.label, toInstant(timer.dueAt), timer.createdByUserId ?? null, at, at,
    ]),
  )
}

export async function getTimer(id: string, db: Db): Promise<Timer | null> {
  const row = await select(db).where('t.id', id).first()
  return row ? toTimer(row) : null
}

/** The timer with its row locked until the transaction ends. */
export async function lockTimer(id: string, trx: Knex.Transaction): Promise<Timer | null> {
  const held = await trx('timers').where({ id }).forUpdate().first<{ id: string } | undefined>('id')
  return held ? getTimer(id, trx) : null
}

/** All timers of one subject that were not ended, each locked by its key: a search with locks would lock its neighbours. */
export async function lockTimersOf(subjectType: Timer['subjectType'], subjectId: string, trx: Knex.Transaction): Promise<Timer[]> {
  const found = await trx('timers').where({ subject_type: subjectType, subject_id: subjectId }).orderBy('id').select<{ id: string }[]>('id')
  const timers: Timer[] = []
  for (const { id } of found) {
    const timer = await lockTimer(id, trx)
    if (timer && timer.state !== 'done' && timer.state !== 'cancelled') timers.push(timer)
  }
  return timers
}

/** The one timer of its kind and subject. */
export async function findTimerOf(kind: TimerKind, subjectType: Timer['subjectType'], subjectId: string, db: Db): Promise<Timer | null> {
  const row = await select(db).where({ 't.kind': kind, 't.subject_type': subjectType, 't.subject_id': subjectId }).first()
  return row ? toTimer(row) : null
}

/** Other applications to pieces of this one whose timers were not ended, the oldest first. */
export async function timedApplicationsUnder(applicationId: string, db: Db): Promise<string[]> {
  const rows = await db('application_pieces as mine')
    .join('application_pieces as theirs', 'theirs.piece_id', 'mine.piece_id')
    .join('applications as a', 'a.id', 'theirs.application_id')
    .join('application_current as n', 'n.application_id', 'a.id')
    .join('timers as t', (on) => void on.on('t.subject_id', 'a.id').andOnVal('t.subject_type', 'application'))
    .where('mine.application_id', applicationId)
    .whereNot('a.id', applicationId)
    .whereIn('t.state', ['waiting', 'fired', 'acknowledged'])
    .groupBy(['a.id', 'n.first_at'])
    .orderBy(['n.first_at', 'a.id'])
    .select<{ id: string }[]>('a.id')
  return rows.map(({ id }) => id)
}

/** Other applications to pieces of this one that opened a window of which no timer waits or rings, the oldest first. */
export async function untimedApplicationsUnder(applicationId: string, db: Db): Promise<string[]> {
  const rows = await db('application_pieces as mine')
    .join('application_pieces as theirs', 'theirs.piece_id', 'mine.piece_id')
    .join('application_current as n', 'n.application_id', 'theirs.application_id')
    .where('mine.application_id', applicationId)
    .whereNot('n.application_id', applicationId)
    .whereNotNull('n.opens_at')
    .whereNotExists((live) => live.select(db.raw('1')).from('timers as t').whereIn('t.state', ['waiting', 'fired', 'acknowledged'])
      .whereRaw('t.subject_type = \'application\' AND t.subject_id = n.application_id'))
    .groupBy(['n.application_id', 'n.first_at'])
    .orderBy(['n.first_at', 'n.application_id'])
    .select<{ application_id: string }[]>('n.application_id')
  return rows.map(({ application_id: id }) => id)
}

/** What may change of a timer. Instants are epoch milliseconds. */
export interface TimerChange {
  state?: TimerState
  dueAt?: number
  firedAt?: number | null
  announcedAt?: number | null
  silencedUntil?: number | null
  silencedBy?: string | null
  silencedReason?: string | null
  acknowledgedAt?: number | null
  acknowledgedBy?: string | null
}

export async function updateTimer(id: string, change: TimerChange, now: number, db: Db): Promise<void> {
  const columns: Record<string, unknown> = { version: db.raw('version + 1'), updated_at: toInstant(now) }
  if (change.state !== undefined) columns.state = change.state
  if (change.dueAt !== undefined) columns.due_at = toInstant(change.dueAt)
  if (change.firedAt !== undefined) columns.fired_at = toInstantOrNull(change.firedAt)
  if (change.announcedAt !== undefined) columns.announced_at = toInstantOrNull(change.announcedAt)
  if (change.silencedUntil !== undefined) columns.silenced_until = toInstantOrNull(change.silencedUntil)
  if (change.silencedBy !== undefined) columns.silenced_by = change.silencedBy
  if (change.silencedReason !== undefined) columns.silenced_reason = change.silencedReason
  if (change.acknowledgedAt !== undefined) columns.acknowledged_at = toInstantOrNull(change.acknowledgedAt)
  if (change.acknowledgedBy !== undefined) columns.acknowledged_by = change.acknowledgedBy
  await db('timers').where({ id }).update(columns)
}

export interface TimerFilter {
  boothId?: string
  kind?: TimerKind
  states?: readonly TimerState[]
  after?: { at: number; id: string }
  limit: number
}

/** Timers by the instant they are due. Those without a booth belong to every booth. */
export async function listTimers(filter: TimerFilter, db: Db): Promise<Timer[]> {
  const query = select(db).orderBy(['t.due_at', 't.id']).limit(filter.limit)
  const { boothId, after } = filter
  if (boothId) void query.where((part) => part.where('t.booth_id', boothId).orWhereNull('t.booth_id'))
  if (filter.kind) void query.where('t.kind', filter.kind)
  if (filter.states) void query.whereIn('t.state', filter.states)
  if (after) void query.whereRaw('(t.due_at, t.id) > (?, ?)', [toInstant(after.at), after.id])
  return (await query).map(toTimer)
}

/**
 * Timers that call for a person: everything that has fired and was not acknowledged, and pots whose life is up
 * until they are emptied. With a booth: its own, those of no booth, and the pots of all.
 */
export async function listAlarms(boothId: string | null, db: Db): Promise<Timer[]> {
  const query = select(db)
    .where((part) =>
      part
        .where((pot) => pot.where('t.kind', 'pot-up').whereIn('t.state', ['fired', 'acknowledged']))
        .orWhere((other) => other.whereIn('t.kind', ['window-closes', 'dry-sand', 'dry-stack', 'dry-pack', 'free']).where('t.state', 'fired')),
    )
    .orderBy(['t.due_at', 't.id'])
  if (boothId) void query.where((part) => part.where('t.kind', 'pot-up').orWhere('t.booth_id', boothId).orWhereNull('t.booth_id'))
  return (await query).map(toTimer)
}
