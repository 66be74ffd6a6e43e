import type { Knex } from 'knex'
import type { Batch } from '#shared/schemas/batches'
import type { BoothClash } from '#shared/utils/bench-booth'
import { isoOf, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A value of the record that was put right. `at` is in epoch milliseconds. */
export interface NewAmendment {
  id: string
  batchId: string
  field: string
  from: string | null
  to: string | null
  reason: string
  userId: string
  approvalId: string | null
  at: number
  /** What must not meet in the booth that it names; null where nothing clashes. */
  clash: BoothClash | null
}

export async function insertAmendment(amendment: NewAmendment, trx: Knex.Transaction): Promise<void> {
  await trx('amendments').insert({
    id: amendment.id, batch_id: amendment.batchId, field: amendment.field, from_value: amendment.from, to_value: amendment.to, reason: amendment.reason,
    user_id: amendment.userId, approval_id: amendment.approvalId, at: toInstant(amendment.at),
    clash: amendment.clash && JSON.stringify(amendment.clash),
  })
}

interface Row {
  id: string
  field: string
  from_value: string | null
  to_value: string | null
  reason: string
  user_name: string
  approved_by_name: string | null
  at: Date
}

/** Amendments of a batch, the oldest first, with names where the values are ids. */
export async function readAmendments(id: string, db: Db): Promise<Batch['amendments']> {
  const rows = await db('amendments as a').join('users as u', 'u.id', 'a.user_id')
    .leftJoin('approvals as p', 'p.id', 'a.approval_id').leftJoin('users as y', 'y.id', 'p.approved_by_user_id')
    .where('a.batch_id', id).orderBy(['a.at', 'a.id'])
    .select<Row[]>('a.id', 'a.field', 'a.from_value', 'a.to_value', 'a.reason', 'u.name as user_name', 'y.name as approved_by_name', 'a.at')
  const names = await namesOf(rows, db)
  const named = (value: string | null) => (value === null ? null : (names.get(value) ?? value))
  return rows.map((row) => ({
    id: row.id, field: row.field, from: row.from_value, to: row.to_value, fromName: named(row.from_value), toName: named(row.to_value),
    reason: row.reason, userName: row.user_name, approvedByName: row.approved_by_name, at: isoOf(row.at),
  }))
}

const namedBy = [
  { fits: (field: string) => field.endsWith('.lotId'), table: 'lots', column: 'lot_number' },
  { fits: (field: string) => field === 'gunId', table: 'guns', column: 'name' },
  { fits: (field: string) => field === 'boothId', table: 'booths', column: 'name' },
  { fits: (field: string) => field === 'mixedByUserId', table: 'users', column: 'name' },
] as const

async function namesOf(rows: readonly Row[], db: Db): Promise<Map<string, string>> {
  const names = new Map<string, string>()
  for (const { fits, table, column } of namedBy) {
    const ids = rows.filter(({ field }) => fits(field)).flatMap((row) => [row.from_value, row.to_value]).filter((value) => value !== null)
    if (ids.length === 0) continue
    const found = await db(table).whereIn('id', ids).select<{ id: string; name: string }[]>('id', `${column} as name`)
    for (const row of found) names.set(row.id, row.name)
  }
  return names
}
