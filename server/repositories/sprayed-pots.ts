import type { Knex } from 'knex'
import { decimalOf } from '../utils/rows'

/** A pot with the area it coated and its first and last spray, epoch milliseconds. */
export interface SprayedPot {
  userId: string
  gunId: string
  areaM2: string
  coats: number
  firstAt: number
  lastAt: number
}

interface PotRow {
  mixed_by_user_id: string
  gun_id: string
  area_m2: string
  coats: number | null
  first_spray_at: Date
  last_spray_at: Date
}

/** The latest pots mixed since an instant whose first and last spray were both tapped, the youngest first. */
export async function listSprayedPots(since: Date, limit: number, db: Knex | Knex.Transaction): Promise<SprayedPot[]> {
  const rows = await db('batches as b').join('batch_current as c', 'c.batch_id', 'b.id')
    .where('b.mixed_at', '>=', since).where('b.outcome', 'mixed').whereNotNull('c.gun_id').whereNotNull('b.area_m2')
    .whereNotNull('c.first_spray_at').whereNotNull('c.last_spray_at')
    .orderBy([{ column: 'b.mixed_at', order: 'desc' }, { column: 'b.id', order: 'desc' }]).limit(limit)
    .select<PotRow[]>('c.mixed_by_user_id', 'c.gun_id', 'b.area_m2', 'b.coats', 'c.first_spray_at', 'c.last_spray_at')
  return rows.map(row => ({
    userId: row.mixed_by_user_id, gunId: row.gun_id, areaM2: decimalOf(row.area_m2), coats: row.coats ?? 1,
    firstAt: row.first_spray_at.getTime(), lastAt: row.last_spray_at.getTime(),
  }))
}
