import type { Knex } from 'knex'
import { canonicalJson, type Canonical } from './canonical'
import { principalName, type Context } from './context'
import { sha256 } from './hash'
import { toInstant } from './rows'
import type { NewEvent } from './transactions'

/** Format of the audited bytes. A later form gets the next number; old entries keep theirs. */
const auditFormat = 1

/** One thing that was done. Holds ids, never names or addresses. */
export interface AuditEntry {
  /** What was done, as `resource.verb`. */
  action: string
  /** What it was done to, as `kind:id`. */
  subject: string
  /** The facts, before and after where something changed. */
  facts: Canonical
}

interface Head {
  seq: string
  hash: string
}

/**
 * Numbers the entry and the events, chains the entry and moves the head. Must be the last statements of a
 * transaction: the head's row stays locked until the commit, which makes the order of numbers the order of commits.
 *
 * @returns the last number given
 */
export async function appendLedger(
  trx: Knex.Transaction,
  ctx: Pick<Context, 'principal' | 'requestId'>,
  now: number,
  entry: AuditEntry,
  events: NewEvent[],
): Promise<number> {
  const head = await trx('ledger_head').select<Head[]>('seq', 'hash').where('id', 1).forUpdate().first()
  if (!head) throw new Error('the ledger has no head')
  const at = toInstant(now)
  let seq = Number(head.seq) + 1
  const actor = principalName(ctx.principal)
  const bytes = canonicalJson({ ...entry, actor, at: now, format: auditFormat, requestId: ctx.requestId })
  const hash = entryHash(head.hash, seq, bytes)
  await trx('audit_entries').insert({
    seq, format: auditFormat, at, action: entry.action, actor, subject: entry.subject, bytes, prev_hash: head.hash, hash,
  })
  const rows = events.map((event) => ({
    seq: ++seq, type: event.type, at, subject: event.subject, booth_id: event.boothId, payload: JSON.stringify(event.payload),
  }))
  if (rows.length > 0) await trx('events').insert(rows)
  await trx('ledger_head').where('id', 1).update({ seq, hash })
  return seq
}

/** The link of the chain: SHA-256 over the previous hash, the number and the audited bytes. */
export const entryHash = (previous: string, seq: number, bytes: string): string => sha256(previous, String(seq), bytes)

/** Outcome of a check of the whole chain. */
export interface ChainVerdict {
  ok: boolean
  entries: number
  /** Number of the first entry that does not fit, where one does not. */
  firstBadSeq: number | null
  /** What is wrong with it, in plain words. */
  fault: string | null
}

interface Row {
  seq: string
  format: number
  at: Date
  action: string
  actor: string
  subject: string
  bytes: string
  prev_hash: string
  hash: string
}

const page = 1000

/**
 * Walks the chain from its first entry to the head and names the first entry that was changed, removed,
 * inserted or moved. A tail that was cut off is found by the head.
 */
export async function verifyChain(db: Knex): Promise<ChainVerdict> {
  let previous = '0'.repeat(64)
  let last = 0
  let entries = 0
  for (;;) {
    const rows = await db('audit_entries').where('seq', '>', last).orderBy('seq').limit(page).select<Row[]>()
    for (const row of rows) {
      const fault = faultOf(row, previous)
      if (fault) return { ok: false, entries, firstBadSeq: Number(row.seq), fault }
      previous = row.hash
      last = Number(row.seq)
      entries++
    }
    if (rows.length < page) break
  }
  const head = await db('ledger_head').select<Head[]>('seq', 'hash').where('id', 1).first()
  if (head?.hash === previous && Number(head.seq) >= last) return { ok: true, entries, firstBadSeq: null, fault: null }
  return { ok: false, entries, firstBadSeq: last + 1, fault: 'the end of the chain is not what the head says' }
}

function faultOf(row: Row, previous: string): string | null {
  if (row.prev_hash !== previous) return 'it does not follow the entry before it'
  if (entryHash(previous, Number(row.seq), row.bytes) !== row.hash) return 'its bytes are not what was hashed'
  const columns: Record<string, unknown> = { action: row.action, actor: row.actor, subject: row.subject, format: row.format, at: row.at.getTime() }
  const audited = JSON.parse(row.bytes) as Record<string, unknown>
  const differing = Object.keys(columns).find((name) => audited[name] !== columns[name])
  return differing ? `its ${differing} column is not what was audited` : null
}
