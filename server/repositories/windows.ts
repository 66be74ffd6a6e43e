import type { Knex } from 'knex'
import type { LiveWindow } from '#shared/schemas/live'
import { isoOf, isoOrNull } from '../utils/rows'

type Db = Knex | Knex.Transaction

interface WindowRow {
  id: string
  job_id: string
  job_code: string
  job_title: string
  job_step_id: string
  step_title: string
  step_position: number
  booth_id: string | null
  booth_name: string | null
  first_at: Date
  last_at: Date
  opens_at: Date
  closing_at: Date | null
  closes_at: Date | null
  last_assumed: number
  details: string
}

export interface WindowFilter {
  applicationId?: string
  boothId?: string | null
  jobIds?: readonly string[]
}

/** A window with what it is still about. */
export interface OpenWindow extends Omit<LiveWindow, 'state'> {
  stepPosition: number
  /** Pieces that were not coated or sanded since. */
  pieceIds: string[]
}

/**
 * Windows that still count: started by a coat or sanding of a running job, for the pieces that nothing was done to
 * since. One whose pieces were all treated again has ended.
 */
export async function findWindows(filter: WindowFilter, db: Db): Promise<OpenWindow[]> {
  const { applicationId, boothId, jobIds } = filter
  const query = db('applications as a')
    .join('application_current as n', 'n.application_id', 'a.id')
    .join('jobs as j', 'j.id', 'a.job_id')
    .join('job_steps as js', 'js.id', 'a.job_step_id')
    .join('schedule_steps as ss', 'ss.id', 'js.schedule_step_id')
    .leftJoin('booths as b', 'b.id', 'n.booth_id')
    .whereNotNull('n.opens_at')
    .whereIn('j.state', ['planned', 'running', 'held'])
    .orderBy(['n.closes_at', 'n.opens_at', 'a.id'])
    .select<WindowRow[]>(
      'a.id', 'a.job_id', 'j.code as job_code', 'j.title as job_title', 'a.job_step_id', 'ss.title as step_title', 'js.position as step_position',
      'n.booth_id', 'b.name as booth_name', 'n.first_at', 'n.last_at', 'n.opens_at', 'n.closing_at', 'n.closes_at',
      'a.last_assumed', 'a.details',
    )
  if (applicationId) void query.where('a.id', applicationId)
  if (boothId) void query.where((part) => part.where('n.booth_id', boothId).orWhereNull('n.booth_id'))
  if (jobIds) void query.whereIn('a.job_id', jobIds)
  const rows = await query
  const pieces = await untouchedPieces(rows.map(({ id }) => id), db)
  return rows.flatMap((row) => {
    const left = pieces.get(row.id) ?? []
    return left.length > 0 ? [toWindow(row, left)] : []
  })
}

interface PieceRow {
  application_id: string
  piece_id: string
  label: string
}

/** Pieces of these applications on which no later coat or sanding was done, in the order of the job's list. */
async function untouchedPieces(applicationIds: readonly string[], db: Db): Promise<Map<string, PieceRow[]>> {
  const found = new Map<string, PieceRow[]>()
  if (applicationIds.length === 0) return found
  const rows = await db('application_pieces as ap')
    .join('applications as a', 'a.id', 'ap.application_id')
    .join('application_current as n', 'n.application_id', 'a.id')
    .join('pieces as p', 'p.id', 'ap.piece_id')
    .whereIn('ap.application_id', applicationIds)
    .whereNotExists((later) =>
      later
        .select(db.raw('1'))
        .from('application_pieces as lp')
        .join('applications as l', 'l.id', 'lp.application_id')
        .join('application_current as ln', 'ln.application_id', 'l.id')
        .whereRaw('lp.piece_id = ap.piece_id AND l.kind IN (\'coat\', \'sand\') AND l.id <> a.id AND (ln.first_at, l.created_at, l.id) > (n.first_at, a.created_at, a.id)'),
    )
    .orderBy(['p.position', 'p.id'])
    .select<PieceRow[]>('ap.application_id', 'ap.piece_id', 'p.label')
  for (const row of rows) found.set(row.application_id, [...(found.get(row.application_id) ?? []), row])
  return found
}

function toWindow(row: WindowRow, pieces: PieceRow[]): OpenWindow {
  return {
    id: row.id,
    jobId: row.job_id,
    jobCode: row.job_code,
    jobTitle: row.job_title,
    jobStepId: row.job_step_id,
    stepTitle: row.step_title,
    stepPosition: row.step_position,
    pieces: pieces.map(({ label }) => label),
    pieceIds: pieces.map(({ piece_id: id }) => id),
    boothId: row.booth_id,
    boothName: row.booth_name,
    firstAt: isoOf(row.first_at),
    lastAt: isoOf(row.last_at),
    opensAt: isoOf(row.opens_at),
    closingAt: isoOrNull(row.closing_at),
    closesAt: isoOrNull(row.closes_at),
    assumed: row.last_assumed === 1 || (JSON.parse(row.details) as { firstAssumed?: boolean }).firstAssumed === true,
    unended: null,
  }
}
