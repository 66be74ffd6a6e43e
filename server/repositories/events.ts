import type { Knex } from 'knex'
import { isoOf } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A committed event as it lies in the database. */
export interface StoredEvent {
  seq: number
  type: string
  at: string
  subject: string
  boothId: string | null
  payloadJson: string
}

interface EventRow {
  seq: string
  type: string
  at: Date
  subject: string
  booth_id: string | null
  payload: string
}

/** The last number given to an audit entry or event. Everything up to it is committed and visible. */
export async function readHead(db: Db): Promise<number> {
  const row = await db('ledger_head').where('id', 1).first<{ seq: string } | undefined>('seq')
  if (!row) throw new Error('the ledger has no head')
  return Number(row.seq)
}

/** Events after `seq`, up to `until` where it is given, in order. */
export async function eventsAfter(seq: number, limit: number, db: Db, until?: number): Promise<StoredEvent[]> {
  const query = db('events').where('seq', '>', seq).orderBy('seq').limit(limit)
    .select<EventRow[]>('seq', 'type', 'at', 'subject', 'booth_id', 'payload')
  if (until !== undefined) void query.where('seq', '<=', until)
  const rows = await query
  return rows.map((row) => ({
    seq: Number(row.seq), type: row.type, at: isoOf(row.at), subject: row.subject, boothId: row.booth_id, payloadJson: row.payload,
  }))
}

/**
 * True when every number after `seq` up to `until` is still there, as an event or as an audit entry.
 * Numbers are given without gaps, so that a missing one was removed.
 */
export async function isUnbroken(seq: number, until: number, db: Db): Promise<boolean> {
  const [events, entries] = await Promise.all(['events', 'audit_entries'].map((table) =>
    db(table).where('seq', '>', seq).where('seq', '<=', until).count<{ n: string }[]>('* as n').first()))
  return Number(events?.n ?? 0) + Number(entries?.n ?? 0) === until - seq
}
