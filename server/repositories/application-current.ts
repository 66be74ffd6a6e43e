import type { Knex } from 'knex'
import { msOrNull, toInstant, toInstantOrNull } from '../utils/rows'

/** When and where a coat was sprayed, and the window that it opened. Instants are epoch milliseconds. */
export interface EffectiveCoat {
  firstAt: number
  lastAt: number
  boothId: string | null
  window: { opensAt: number; closingAt: number | null; closesAt: number | null } | null
}

/** A coat of a batch as it was recorded, and as it is known now. */
export interface CoatOnRecord {
  id: string
  jobStepId: string
  coatNumber: number
  recorded: Pick<EffectiveCoat, 'firstAt' | 'lastAt' | 'boothId' | 'window'>
  now: EffectiveCoat
  firstAssumed: boolean
  lastAssumed: boolean
}

const columnsOf = ({ firstAt, lastAt, boothId, window }: EffectiveCoat, now: number) => ({
  first_at: toInstant(firstAt), last_at: toInstant(lastAt), booth_id: boothId, opens_at: toInstantOrNull(window?.opensAt),
  closing_at: toInstantOrNull(window?.closingAt), closes_at: toInstantOrNull(window?.closesAt), updated_at: toInstant(now),
})

export async function insertCurrentCoat(id: string, coat: EffectiveCoat, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('application_current').insert({ application_id: id, ...columnsOf(coat, now) })
}

export async function rewriteCoat(id: string, coat: EffectiveCoat, now: number, trx: Knex.Transaction): Promise<void> {
  await trx('application_current').where({ application_id: id }).update(columnsOf(coat, now))
}

interface Moments {
  first_at: Date
  last_at: Date
  booth_id: string | null
  opens_at: Date | null
  closing_at: Date | null
  closes_at: Date | null
}

interface Row extends Moments {
  id: string
  job_step_id: string
  coat_number: number | null
  last_assumed: number
  details: string
  now_first_at: Date
  now_last_at: Date
  now_booth_id: string | null
  now_opens_at: Date | null
  now_closing_at: Date | null
  now_closes_at: Date | null
}

/** The coats that a batch laid, in the order in which they were written. */
export async function listCoatsOf(batchId: string, db: Knex | Knex.Transaction): Promise<CoatOnRecord[]> {
  const rows = await db('application_batches as l')
    .join('applications as a', 'a.id', 'l.application_id')
    .join('application_current as n', 'n.application_id', 'a.id')
    .where({ 'l.batch_id': batchId, 'a.kind': 'coat' })
    .orderBy(['a.created_at', 'a.last_at', 'a.id'])
    .select<Row[]>(
      'a.id', 'a.job_step_id', 'a.coat_number', 'a.last_assumed', 'a.details', 'a.first_at', 'a.last_at', 'a.booth_id', 'a.opens_at', 'a.closing_at', 'a.closes_at',
      'n.first_at as now_first_at', 'n.last_at as now_last_at', 'n.booth_id as now_booth_id', 'n.opens_at as now_opens_at', 'n.closing_at as now_closing_at',
      'n.closes_at as now_closes_at',
    )
  return rows.map((row) => ({
    id: row.id,
    jobStepId: row.job_step_id,
    coatNumber: row.coat_number ?? 1,
    recorded: toCoat(row),
    now: toCoat({
      first_at: row.now_first_at, last_at: row.now_last_at, booth_id: row.now_booth_id, opens_at: row.now_opens_at, closing_at: row.now_closing_at, closes_at: row.now_closes_at,
    }),
    firstAssumed: (JSON.parse(row.details) as { firstAssumed?: boolean }).firstAssumed === true,
    lastAssumed: row.last_assumed === 1,
  }))
}

const toCoat = (row: Moments): EffectiveCoat => ({
  firstAt: row.first_at.getTime(),
  lastAt: row.last_at.getTime(),
  boothId: row.booth_id,
  window: row.opens_at && { opensAt: row.opens_at.getTime(), closingAt: msOrNull(row.closing_at), closesAt: msOrNull(row.closes_at) },
})
