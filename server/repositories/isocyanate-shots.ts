import type { Knex } from 'knex'
import { latestShot } from '#shared/utils/pot-sprays'
import { msOrNull, toInstant } from '../utils/rows'
import { longestPotMs } from './booth-cleanings'
import { findOpenGuns, type OpenGun } from './open-guns'

const reacts = 'EXISTS (SELECT 1 FROM batch_components x JOIN materials a ON a.id = x.material_id WHERE x.batch_id = c.batch_id AND a.contains_isocyanates = 1)'

interface Row {
  batch_id: string
  closed_at: Date | null
  last_spray_at: Date | null
  tapped_at: Date | null
  flushed_at: Date | null
  emptied_details: string | null
}

/**
 * The last shot of isocyanates in a booth, or the end of cleaning a gun after it, by what its pots' effective values
 * say; epoch milliseconds, null where there was none.
 */
export async function findLastIsocyanateShot(boothId: string, db: Knex.Transaction): Promise<number | null> {
  const newest = await db('batch_current as c').where('c.booth_id', boothId).whereRaw(reacts)
    .where((part) => part.whereNotNull('c.first_spray_at').orWhereNotNull('c.last_spray_at').orWhere('c.state', 'emptied'))
    .orderBy('c.mixed_at', 'desc').first<{ mixed_at: Date } | undefined>('c.mixed_at')
  if (!newest) return null
  const event = (kind: string, column: string, name: string) =>
    db.raw(`(SELECT MAX(${column}) FROM batch_events e WHERE e.batch_id = c.batch_id AND e.kind = ?) AS ${name}`, [kind])
  const rows = await db('batch_current as c').where('c.booth_id', boothId).whereRaw(reacts)
    .where('c.mixed_at', '>=', toInstant(newest.mixed_at.getTime() - longestPotMs))
    .select<Row[]>(
      'c.batch_id', 'c.closed_at', 'c.last_spray_at', event('last-spray', 'e.at', 'tapped_at'), event('gun-flushed', 'e.at', 'flushed_at'),
      event('emptied', 'e.details', 'emptied_details'),
    )
  const open = await findOpenGuns(rows.map(({ batch_id: id }) => id), db)
  const shots = rows.flatMap((row) => shotsOf(row, open.filter(({ batchId }) => batchId === row.batch_id)))
  return shots.length === 0 ? null : Math.max(...shots)
}

function shotsOf(row: Row, open: readonly OpenGun[]): number[] {
  const emptied = row.emptied_details === null ? null : (JSON.parse(row.emptied_details) as { lastSprayAssumed?: boolean })
  const closedAt = msOrNull(row.closed_at)
  const assumed = emptied?.lastSprayAssumed === true && closedAt !== null ? [latestShot(open, closedAt)] : []
  // What was put right stands over what was tapped.
  const noted = [msOrNull(row.last_spray_at ?? row.tapped_at), msOrNull(row.flushed_at)]
  return [...assumed, ...noted, ...open.map(({ movedOnAt }) => movedOnAt)].filter((at) => at !== null)
}

/** Puts what a booth knows of its last shot of isocyanates in agreement with its pots. Epoch milliseconds. */
export async function putIsocyanateShot(boothId: string, at: number | null, trx: Knex.Transaction): Promise<void> {
  await trx('booths').where({ id: boothId }).update({ isocyanate_shot_at: at === null ? null : toInstant(at) })
}
