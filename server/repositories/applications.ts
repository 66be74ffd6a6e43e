import type { Knex } from 'knex'
import { toInstant, toInstantOrNull } from '../utils/rows'
import { insertCurrentCoat } from './application-current'

/** A coat on pieces, from batches. Instants are epoch milliseconds. */
export interface NewApplication {
  id: string
  jobId: string
  jobStepId: string
  coatNumber: number
  face: 'front' | 'back' | 'both' | 'edges' | 'all' | null
  firstAt: number
  lastAt: number
  /** Nobody noted the last spray. */
  lastAssumed: boolean
  boothId: string | null
  gunId: string | null
  userId: string | null
  window: { opensAt: number; closingAt: number | null; closesAt: number | null } | null
  details: Record<string, unknown>
  pieceIds: readonly string[]
  batchIds: readonly string[]
}

export async function insertCoat(application: NewApplication, now: number, trx: Knex.Transaction): Promise<void> {
  const { id, window } = application
  await trx('applications').insert({
    id, job_id: application.jobId, job_step_id: application.jobStepId, kind: 'coat', coat_number: application.coatNumber, face: application.face,
    first_at: toInstant(application.firstAt), last_at: toInstant(application.lastAt), last_assumed: application.lastAssumed, booth_id: application.boothId,
    gun_id: application.gunId, user_id: application.userId, opens_at: toInstantOrNull(window?.opensAt), closing_at: toInstantOrNull(window?.closingAt),
    closes_at: toInstantOrNull(window?.closesAt), details: JSON.stringify(application.details), created_at: toInstant(now),
  })
  await insertCurrentCoat(id, application, now, trx)
  if (application.pieceIds.length > 0) {
    await trx('application_pieces').insert(application.pieceIds.map((pieceId) => ({ application_id: id, piece_id: pieceId })))
  }
  await trx('application_batches').insert(application.batchIds.map((batchId) => ({ application_id: id, batch_id: batchId })))
}

/**
 * How many coats of this step lie on these pieces already, pots of the same plan not counted: they lay one coat
 * together.
 */
export async function coatsOn(jobStepId: string, pieceIds: readonly string[], planId: string, db: Knex | Knex.Transaction): Promise<number> {
  const row = await db('applications as a')
    .where({ 'a.job_step_id': jobStepId, 'a.kind': 'coat' })
    .whereExists((own) => own.select(db.raw('1')).from('application_pieces as p').whereRaw('p.application_id = a.id').whereIn('p.piece_id', [...pieceIds]))
    .whereNotExists((same) =>
      same.select(db.raw('1')).from('application_batches as l').join('batches as b', 'b.id', 'l.batch_id').whereRaw('l.application_id = a.id').where('b.plan_id', planId))
    .max<{ most: number | null }[]>({ most: 'a.coat_number' })
  return row[0]?.most ?? 0
}

export async function batchPieceIds(batchId: string, db: Knex | Knex.Transaction): Promise<string[]> {
  const rows = await db('batch_pieces').where({ batch_id: batchId }).orderBy('piece_id').select<{ piece_id: string }[]>('piece_id')
  return rows.map(({ piece_id: id }) => id)
}
