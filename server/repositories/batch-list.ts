import type { Knex } from 'knex'
import type { BatchListItem, BatchListQuery } from '#shared/schemas/batches'
import { toInstant } from '../utils/rows'
import { selectNamed, toNamed, type NamedRow } from './batch-rows'

/** Filters of the log with the days of the shop as instants; epoch milliseconds. */
export interface BatchFilter extends Pick<BatchListQuery, 'jobId' | 'materialId' | 'state' | 'mixedBy' | 'boothId' | 'deviations' | 'review'> {
  /** Any of these lots; an empty list fits no batch. */
  lotIds?: readonly string[] | undefined
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

/**
 * One page of the log, the youngest first, in one statement: the page's ids are found in an index first, names are
 * joined to those few rows only. Every filter has an index in the order of the list; what a lot or a material is in
 * stands in `batch_uses` in that order too.
 */
export async function listBatchRows(filter: BatchFilter, db: Knex): Promise<ListedBatch[]> {
  const rows = (await selectNamed(db.from(pageOf(filter, db).as('p')).join('batches as b', 'b.id', 'p.page_id').join('batch_current as c', 'c.batch_id', 'b.id'))
    .select(
      'p.page_at', 'c.worst_role',
      db.raw('(SELECT a.code FROM batch_components x JOIN materials a ON a.id = x.material_id WHERE x.batch_id = b.id AND x.role = \'base\' ORDER BY x.component_index LIMIT 1) AS base_code'),
    )
    .orderBy([{ column: 'p.page_at', order: 'desc' }, { column: 'p.page_id', order: 'desc' }])) as ListRow[]
  return rows.map((row) => ({
    item: { ...toNamed(row), baseCode: row.base_code, worstRole: row.worst_role },
    sortedAt: row.page_at.getTime(),
  }))
}

/** Ids and instants of the page alone. */
function pageOf(filter: BatchFilter, db: Knex): Knex.QueryBuilder {
  const { lotIds, materialId, limit } = filter
  const used = lotIds ?? (materialId === undefined ? null : [materialId])
  const page = used === null ? db('batch_current as c') : db('batch_uses as o').whereIn('o.used_id', [...used])
  const order = used === null ? { at: 'c.mixed_at', id: 'c.batch_id' } : { at: 'o.mixed_at', id: 'o.batch_id' }
  if (used !== null && looksAtState(filter)) void page.join('batch_current as c', 'c.batch_id', 'o.batch_id')
  // Several lots may have gone into one batch.
  if (used !== null && used.length > 1) void page.distinct()
  void page.select(`${order.id} as page_id`, `${order.at} as page_at`)
    .orderBy([{ column: order.at, order: 'desc' }, { column: order.id, order: 'desc' }])
    .limit(limit)
  narrow(page, filter)
  if (lotIds !== undefined && materialId !== undefined) {
    void page.whereExists((part) => part.select('x.batch_id').from('batch_uses as x').where('x.used_id', materialId).whereRaw('x.mixed_at = o.mixed_at AND x.batch_id = o.batch_id'))
  }
  return within(page, filter, order)
}

const looksAtState = ({ jobId, state, mixedBy, boothId, deviations, review }: BatchFilter): boolean =>
  [jobId, state, mixedBy, boothId, review].some((one) => one !== undefined) || deviations === true

function narrow(page: Knex.QueryBuilder, { jobId, state, mixedBy, boothId, deviations, review }: BatchFilter): void {
  if (jobId) void page.where('c.job_id', jobId)
  if (mixedBy) void page.where('c.mixed_by_user_id', mixedBy)
  if (boothId) void page.where('c.booth_id', boothId)
  if (state) void page.where('c.state', state)
  if (review !== undefined) void page.where('c.review_open', review)
  if (deviations) void page.where('c.deviates', true)
}

/** The days asked for, and where the page before ended. */
function within(page: Knex.QueryBuilder, { from, before, after }: BatchFilter, order: { at: string; id: string }): Knex.QueryBuilder {
  if (from !== undefined) void page.where(order.at, '>=', toInstant(from))
  if (before !== undefined) void page.where(order.at, '<', toInstant(before))
  if (after) {
    const at = toInstant(after.mixedAt)
    // The first condition is a plain range of the index; the second only sorts out equal instants.
    void page.where(order.at, '<=', at).where((part) => part.where(order.at, '<', at).orWhere(order.id, '<', after.id))
  }
  return page
}
