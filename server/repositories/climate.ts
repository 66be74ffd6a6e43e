import type { Knex } from 'knex'
import { decimalOf, decimalOrNull, isoOf, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A reading as stored; instants in ISO 8601 UTC, degrees Celsius and per cent as decimal strings. */
export interface StoredReading {
  id: string
  boothId: string
  airC: string
  rhPct: string
  surfaceC: string | null
  dewPointC: string
  source: 'typed' | 'sensor'
  userId: string | null
  at: string
}

interface ReadingRow {
  id: string
  booth_id: string
  air_c: string
  rh_pct: string
  surface_c: string | null
  dew_point_c: string
  source: StoredReading['source']
  user_id: string | null
  at: Date
}

const columns = ['c.id', 'c.booth_id', 'c.air_c', 'c.rh_pct', 'c.surface_c', 'c.dew_point_c', 'c.source', 'c.user_id', 'c.at']

const toReading = (row: ReadingRow): StoredReading => ({
  id: row.id,
  boothId: row.booth_id,
  airC: decimalOf(row.air_c),
  rhPct: decimalOf(row.rh_pct),
  surfaceC: decimalOrNull(row.surface_c),
  dewPointC: decimalOf(row.dew_point_c),
  source: row.source,
  userId: row.user_id,
  at: isoOf(row.at),
})

/** Readings, newest first. */
export async function listReadings(
  filter: { boothId?: string; after?: { at: number; id: string }; limit: number }, db: Db,
): Promise<StoredReading[]> {
  const query = db('climate_readings as c').orderBy([{ column: 'c.at', order: 'desc' }, { column: 'c.id', order: 'desc' }]).limit(filter.limit)
  if (filter.boothId) void query.where('c.booth_id', filter.boothId)
  if (filter.after) void query.whereRaw('(c.at, c.id) < (?, ?)', [toInstant(filter.after.at), filter.after.id])
  const rows: ReadingRow[] = await query.select<ReadingRow[]>(columns)
  return rows.map(toReading)
}

/** The last reading of each booth, by the booth's id. */
export async function latestReadings(db: Db): Promise<Map<string, StoredReading>> {
  const rows: ReadingRow[] = await db('booths as b')
    .join('climate_readings as c', 'c.id', db.raw('(SELECT l.id FROM climate_readings l WHERE l.booth_id = b.id ORDER BY l.at DESC, l.id DESC LIMIT 1)'))
    .select<ReadingRow[]>(columns)
  return new Map(rows.map((row) => [row.booth_id, toReading(row)]))
}

export async function insertReading(reading: Omit<StoredReading, 'at'> & { at: number }, db: Db): Promise<void> {
  const at = toInstant(reading.at)
  await db('climate_readings').insert({
    id: reading.id, booth_id: reading.boothId, air_c: reading.airC, rh_pct: reading.rhPct, surface_c: reading.surfaceC,
    dew_point_c: reading.dewPointC, source: reading.source, user_id: reading.userId, at, created_at: at,
  })
}
