import type { Knex } from 'knex'
import { msOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A gun that was started on a pot and of which nobody noted the last spray. Instants are epoch milliseconds. */
export interface OpenGun {
  batchId: string
  /** Null: nobody said which gun. */
  gunId: string | null
  firstAt: number
  /** When the same gun was first sprayed from another pot: it cannot have sprayed this one after it. Null: it was not. */
  movedOnAt: number | null
}

const notEnded = 'NOT EXISTS (SELECT 1 FROM batch_events l WHERE l.batch_id = f.batch_id AND l.kind = \'last-spray\' AND l.gun_id <=> f.gun_id)'
const movedOn = '(SELECT MIN(n.at) FROM batch_events n WHERE n.gun_id = f.gun_id AND n.kind = \'first-spray\' AND n.at > f.at AND n.batch_id <> f.batch_id)'

/** SQL: a first spray `f` whose gun was not ended and was not loaded from another pot since. */
export const stillSpraying = `${notEnded} AND NOT EXISTS (SELECT 1 FROM batch_events n WHERE n.gun_id = f.gun_id AND n.kind = 'first-spray' AND n.at > f.at AND n.batch_id <> f.batch_id)`

/** The guns of these batches that were started and not ended. */
export async function findOpenGuns(batchIds: readonly string[], db: Db): Promise<OpenGun[]> {
  if (batchIds.length === 0) return []
  const rows = await db('batch_events as f')
    .whereIn('f.batch_id', [...batchIds])
    .where('f.kind', 'first-spray')
    .whereRaw(notEnded)
    .orderBy(['f.at', 'f.id'])
    .select<{ batch_id: string; gun_id: string | null; at: Date; moved_on_at: Date | null }[]>('f.batch_id', 'f.gun_id', 'f.at', db.raw(`${movedOn} AS moved_on_at`))
  return rows.map((row) => ({ batchId: row.batch_id, gunId: row.gun_id, firstAt: row.at.getTime(), movedOnAt: msOrNull(row.moved_on_at) }))
}

/** A pot that still stands and that a gun is said to spray. */
export interface PotInGun {
  batchId: string
  boothId: string | null
}

/** The pots that a gun was loaded from before `at` (epoch milliseconds) and whose last spray by it was not noted. */
export async function findPotsInGun(gunId: string, { at, except }: { at: number; except: string }, db: Db): Promise<PotInGun[]> {
  const rows = await db('batch_events as f')
    .join('batch_current as c', 'c.batch_id', 'f.batch_id')
    .where({ 'f.gun_id': gunId, 'f.kind': 'first-spray' })
    .where('f.at', '<', toInstant(at))
    .whereNot('f.batch_id', except)
    .whereIn('c.state', ['fresh', 'closing', 'life-up', 'no-pot-life'])
    .whereRaw(notEnded)
    .orderBy('f.batch_id')
    .select<{ batch_id: string; booth_id: string | null }[]>('f.batch_id', 'c.booth_id')
  return rows.map((row) => ({ batchId: row.batch_id, boothId: row.booth_id }))
}
