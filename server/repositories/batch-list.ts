import type { Knex } from 'knex'
import type { BatchListItem, BatchListQuery } from '#shared/schemas/batches'
import { toInstant } from '../utils/rows'
import { selectNamed, toNamed, type NamedRow } from './batch-rows'

/** Filters of the log with the days of the shop as instants; epoch milliseconds. */
export interface BatchFilter extends Pick<BatchListQuery, 'jobId' | 'materialId' | 'lotId' | 'state' | 'mixedBy' | 'boothId' | 'deviations' | 'review'> {
  /** From this instant on. */
  from?: number | undefined
  /** Before this instant. */
  before?: number | undefined
  after?: { mixedAt: number; id: string } | undefined
  limit: number
}

interface ListRow extends NamedRow {
  page_at: Date
  base_code: string
  worst_role: BatchListItem['worstRole']
}

/** A line with the instant that it was sorted by, epoch milliseconds. */
export interface ListedBatch {
  item: BatchListItem
  sortedAt: number
}

/** Names in one sort order: by the record, or by the present state where the filter asks for that. */
const byRecord = { at: 'b.mixed_at', id: 'b.id' } as const
const byState = { at: 'c.mixed_at', id: 'c.batch_id' } as const

/**
 * One page of the log, the youngest first, in one statement: the page's ids are found in an index first, names are
 * joined to those few rows only.
 */
export async function listBatchRows(filter: BatchFilter, db: Knex): Promise<ListedBatch[]> {
  const order = filter.state !== undefined || filter.review !== undefined ? byState : byRecord
  const page = db('batches as b').join('batch_current as c', 'c.batch_id', 'b.id')
    .select(`${order.id} as page_id`, `${order.at} as page_at`)
    .orderBy([{ column: order.at, order: 'desc' }, { column: order.id, order: 'desc' }])
    .limit(filter.limit)
  narrow(page, filter, order)
  const rows = (await selectNamed(db.from(page.as('p')).join('batches as b', 'b.id', 'p.page_id').join('batch_current as c', 'c.batch_id', 'b.id'))
    .select(
      'p.page_at',
      db.raw('(SELECT a.code FROM batch_components x JOIN materials a ON a.id = x.material_id WHERE x.batch_id = b.id AND x.role = \'base\' ORDER BY x.component_index LIMIT 1) AS base_code'),
      db.raw('(SELECT x.role FROM batch_components x WHERE x.batch_id = b.id AND x.role <> \'base\' AND x.deviation_pct IS NOT NULL ORDER BY ABS(x.deviation_pct) DESC, x.component_index LIMIT 1) AS worst_role'),
    )
    .orderBy([{ column: 'p.page_at', order: 'desc' }, { column: 'p.page_id', order: 'desc' }])) as ListRow[]
  return rows.map((row) => ({
    item: { ...toNamed(row), baseCode: row.base_code, worstRole: row.worst_role },
    sortedAt: row.page_at.getTime(),
  }))
}

function narrow(query: Knex.QueryBuilder, filter: BatchFilter, order: typeof byRecord | typeof byState): void {
  const { jobId, materialId, lotId, state, mixedBy, boothId, from, before, deviations, review, after } = filter
  if (jobId) void query.where('b.job_id', jobId)
  if (mixedBy) void query.where('b.mixed_by_user_id', mixedBy)
  if (boothId) void query.where('c.booth_id', boothId)
  if (state) void query.where('c.state', state)
  if (review !== undefined) void query.where('c.review_open', review)
  if (from !== undefined) void query.where(order.at, '>=', toInstant(from))
  if (before !== undefined) void query.where(order.at, '<', toInstant(before))
  if (materialId) void query.whereExists((part) => part.select('x.batch_id').from('batch_components as x').whereRaw('x.batch_id = b.id').where('x.material_id', materialId))
  if (lotId) void query.whereExists((part) => part.select('x.batch_id').from('batch_pours as x').whereRaw('x.batch_id = b.id').where('x.lot_id', lotId))
  if (deviations) {
    void query.where((part) => part.where('c.out_of_tolerance', true).orWhere('c.corrected', true).orWhere('c.state', 'stopped').orWhereIn('c.used', ['late', 'past-life']))
  }
  // The first condition is a plain range of the index; the second only sorts out equal instants.
  if (after) {
    const at = toInstant(after.mixedAt)
    void query.where(order.at, '<=', at).where((part) => part.where(order.at, '<', at).orWhere(order.id, '<', after.id))
  }
}
