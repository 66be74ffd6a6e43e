import type { Knex } from 'knex'

type Db = Knex | Knex.Transaction

/** A coat that is being sprayed, as far as anybody noted: a first shot, and no last one yet. */
export interface UnendedCoat {
  batchId: string
  planId: string
  /** Coats that the pot was mixed for. */
  coats: number
  jobStepId: string
  jobId: string
  jobCode: string
  jobTitle: string
  stepTitle: string
  stepPosition: number
  boothId: string | null
  boothName: string | null
  /** Epoch milliseconds. */
  firstAt: number
}

export interface UnendedFilter {
  batchId?: string
  boothId?: string | null
  jobIds?: readonly string[]
}

interface Row {
  id: string
  plan_id: string
  coats: number | null
  job_step_id: string
  job_id: string
  job_code: string
  job_title: string
  step_title: string
  step_position: number
  booth_id: string | null
  booth_name: string | null
  first_at: Date
}

/** Pots of running jobs that still stand, of which a gun was started and not ended. */
export async function findUnendedCoats({ batchId, boothId, jobIds }: UnendedFilter, db: Db): Promise<UnendedCoat[]> {
  const query = db('batch_current as c')
    .join('batches as b', 'b.id', 'c.batch_id')
    .join('batch_events as f', (on) => void on.on('f.batch_id', 'b.id').andOnVal('f.kind', 'first-spray'))
    .join('job_steps as js', 'js.id', 'b.job_step_id')
    .join('schedule_steps as ss', 'ss.id', 'js.schedule_step_id')
    .join('jobs as j', 'j.id', 'js.job_id')
    .leftJoin('booths as o', 'o.id', 'c.booth_id')
    .whereIn('c.state', ['fresh', 'closing', 'life-up', 'no-pot-life'])
    .whereIn('j.state', ['planned', 'running', 'held'])
    .whereExists((open) => open.select(db.raw('1')).from('batch_events as s').whereRaw('s.batch_id = b.id AND s.kind = \'first-spray\'')
      .whereNotExists((ended) => ended.select(db.raw('1')).from('batch_events as l').whereRaw('l.batch_id = s.batch_id AND l.kind = \'last-spray\' AND l.gun_id <=> s.gun_id')))
    .groupBy(['b.id', 'b.plan_id', 'b.coats', 'b.job_step_id', 'js.job_id', 'j.code', 'j.title', 'ss.title', 'js.position', 'c.booth_id', 'o.name'])
    .orderBy('b.id')
    .select<Row[]>(
      'b.id', 'b.plan_id', 'b.coats', 'b.job_step_id', 'js.job_id', 'j.code as job_code', 'j.title as job_title', 'ss.title as step_title',
      'js.position as step_position', 'c.booth_id', 'o.name as booth_name', db.raw('COALESCE(MAX(c.first_spray_at), MIN(f.at)) AS first_at'),
    )
  if (batchId) void query.where('b.id', batchId)
  if (boothId) void query.where((part) => part.where('c.booth_id', boothId).orWhereNull('c.booth_id'))
  if (jobIds) void query.whereIn('js.job_id', jobIds)
  return (await query).map((row) => ({
    batchId: row.id, planId: row.plan_id, coats: row.coats ?? 1, jobStepId: row.job_step_id, jobId: row.job_id, jobCode: row.job_code,
    jobTitle: row.job_title, stepTitle: row.step_title, stepPosition: row.step_position, boothId: row.booth_id, boothName: row.booth_name,
    firstAt: row.first_at.getTime(),
  }))
}

/** Labels of these pieces in the order of their list. */
export async function pieceLabels(ids: readonly string[], db: Db): Promise<string[]> {
  const rows = await db('pieces').whereIn('id', [...ids]).orderBy(['position', 'id']).select<{ label: string }[]>('label')
  return rows.map(({ label }) => label)
}
