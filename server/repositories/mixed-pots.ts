import type { Knex } from 'knex'
import type { DraftBody } from '#shared/schemas/drafts'

type Db = Knex | Knex.Transaction

/** A pot that is mixed, or is being mixed, for a coat of a job. */
export interface MixedPot {
  code: string
  planId: string
  jobStepId: string
  /** Chosen pieces; empty where it is for all pieces of the job. */
  pieceIds: string[]
  /** How many coats it is for. */
  coats: number
  mixedByName: string
  /** `standing`: in the record and still to be sprayed; `over`: sprayed, emptied or past its life. */
  state: 'mixing' | 'standing' | 'over'
}

/** What is being mixed first, then what is in the record; a pot that was stopped is for nothing. */
export async function listMixedPots(jobIds: readonly string[], db: Db): Promise<MixedPot[]> {
  if (jobIds.length === 0) return []
  return [...(await listDraftPots(jobIds, db)), ...(await listSealedPots(jobIds, db))]
}

interface DraftRow {
  code: string
  plan_id: string
  job_step_id: string
  body: string
  mixed_by_name: string
}

async function listDraftPots(jobIds: readonly string[], db: Db): Promise<MixedPot[]> {
  const rows = await db('batch_drafts as d')
    .join('job_steps as t', 't.id', 'd.job_step_id')
    .join('users as u', 'u.id', 'd.mixed_by_user_id')
    .where('d.state', 'open')
    .whereIn('t.job_id', jobIds)
    .orderBy([{ column: 'd.updated_at', order: 'desc' }, { column: 'd.id' }])
    .select<DraftRow[]>('d.code', 'd.plan_id', 'd.job_step_id', 'd.body', 'u.name as mixed_by_name')
  return rows.flatMap((row) => {
    const { stopped, pieceIds, plan } = JSON.parse(row.body) as Pick<DraftBody, 'stopped' | 'pieceIds' | 'plan'>
    if (stopped !== null) return []
    return [{
      code: row.code, planId: row.plan_id, jobStepId: row.job_step_id, pieceIds, coats: plan.coats ?? 1, mixedByName: row.mixed_by_name, state: 'mixing' as const,
    }]
  })
}

interface SealedRow {
  id: string
  code: string
  plan_id: string
  job_step_id: string
  coats: number | null
  mixed_by_name: string
  is_over: number
}

async function listSealedPots(jobIds: readonly string[], db: Db): Promise<MixedPot[]> {
  const rows = await db('batches as b')
    .join('batch_current as c', 'c.batch_id', 'b.id')
    .join('users as u', 'u.id', 'c.mixed_by_user_id')
    .where('b.outcome', 'mixed')
    .whereIn('b.job_id', jobIds)
    .whereNotNull('b.job_step_id')
    .orderBy(['b.mixed_at', 'b.id'])
    .select<SealedRow[]>(
      'b.id', 'b.code', 'b.plan_id', 'b.job_step_id', 'b.coats', 'u.name as mixed_by_name',
      db.raw('(c.last_spray_at IS NOT NULL OR c.closed_at IS NOT NULL OR c.state IN (\'life-up\', \'emptied\', \'stopped\')) AS is_over'),
    )
  const chosen = await chosenPieces(rows.map(({ id }) => id), db)
  return rows.map((row) => ({
    code: row.code, planId: row.plan_id, jobStepId: row.job_step_id, pieceIds: chosen.get(row.id) ?? [], coats: row.coats ?? 1, mixedByName: row.mixed_by_name,
    state: Number(row.is_over) === 1 ? 'over' : 'standing',
  }))
}

async function chosenPieces(batchIds: readonly string[], db: Db): Promise<Map<string, string[]>> {
  const chosen = new Map<string, string[]>()
  if (batchIds.length === 0) return chosen
  const rows = await db('batch_pieces').whereIn('batch_id', batchIds).select<{ batch_id: string; piece_id: string }[]>('batch_id', 'piece_id')
  for (const { batch_id: batchId, piece_id: pieceId } of rows) {
    const pieceIds = chosen.get(batchId)
    if (pieceIds) pieceIds.push(pieceId)
    else chosen.set(batchId, [pieceId])
  }
  return chosen
}
