import type { Knex } from 'knex'
import type { BatchFacets } from '#shared/schemas/batches'

/** Jobs offered in the filter, the newest first. */
const mostJobs = 300
const mostCounted = 1000

/** Names to narrow the log by. Archived ones stay: the log reaches back. */
export async function readFacets(db: Knex): Promise<Omit<BatchFacets, 'reviewOpen'>> {
  const jobs = await db('jobs').orderBy([{ column: 'created_at', order: 'desc' }, { column: 'code', order: 'desc' }]).limit(mostJobs)
    .select<BatchFacets['jobs']>('id', 'code', 'title as name')
  const materials = await db('materials').orderBy('code').select<BatchFacets['materials']>('id', 'code', 'name')
  const people = await db('users').orderBy(['name', 'id']).select<BatchFacets['people']>('id', 'name')
  const booths = await db('booths').orderBy(['name', 'id']).select<BatchFacets['booths']>('id', 'name')
  const guns = await db('guns').orderBy(['name', 'id']).select<BatchFacets['guns']>('id', 'name')
  return { jobs, materials, people, booths, guns }
}

/** Batches that wait for a foreman; beyond a thousand nobody counts. */
export async function countOpenReviews(db: Knex): Promise<number> {
  const open = db('batch_current').where('review_open', true).limit(mostCounted).select('batch_id')
  const row = await db.from(open.as('o')).count<{ count: number | string }[]>({ count: '*' }).first()
  return Number(row?.count ?? 0)
}
