import type { Knex } from 'knex'

type Db = Knex | Knex.Transaction

/** One shot, or a gun that was flushed, as it was noted. Instants are epoch milliseconds. */
export interface SprayEvent {
  batchId: string
  kind: 'first-spray' | 'last-spray' | 'gun-flushed'
  gunId: string | null
  gunName: string | null
  at: number
}

interface Row {
  batch_id: string
  kind: SprayEvent['kind']
  gun_id: string | null
  gun_name: string | null
  at: Date
}

/** What the guns did with these batches, in the order of time. */
export async function listSprays(batchIds: readonly string[], db: Db): Promise<SprayEvent[]> {
  if (batchIds.length === 0) return []
  const rows = await db('batch_events as e')
    .leftJoin('guns as g', 'g.id', 'e.gun_id')
    .whereIn('e.batch_id', [...batchIds])
    .whereIn('e.kind', ['first-spray', 'last-spray', 'gun-flushed'])
    .orderBy(['e.at', 'e.created_at', 'e.id'])
    .select<Row[]>('e.batch_id', 'e.kind', 'e.gun_id', 'g.name as gun_name', 'e.at')
  return rows.map((row) => ({ batchId: row.batch_id, kind: row.kind, gunId: row.gun_id, gunName: row.gun_name, at: row.at.getTime() }))
}

/** What spraying and emptying have to know of what is in a pot. */
export interface PotContent {
  /** Chemistry of the base. */
  chemistry: string
  containsIsocyanates: boolean
  /** Standing time by the data sheet, decimal minutes. */
  inductionMin: string
}

/** The content of a sealed batch, by its own components. */
export async function findPotContent(batchId: string, db: Db): Promise<PotContent> {
  const rows = await db('batch_components as x').join('materials as a', 'a.id', 'x.material_id').where('x.batch_id', batchId).orderBy('x.component_index')
    .select<{ role: string; chemistry: string; contains_isocyanates: number }[]>('x.role', 'a.chemistry', 'a.contains_isocyanates')
  const mix = await db('batches as b').join('mix_revisions as r', 'r.id', 'b.mix_revision_id').where('b.id', batchId)
    .first<{ induction_min: string }>('r.induction_min')
  const base = rows.find(({ role }) => role === 'base') ?? rows[0]
  return {
    chemistry: base?.chemistry ?? 'unknown',
    containsIsocyanates: rows.some((row) => row.contains_isocyanates === 1),
    inductionMin: mix.induction_min,
  }
}
