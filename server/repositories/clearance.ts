import type { Knex } from 'knex'
import { msOrNull, toInstant } from '../utils/rows'
import { newId } from '../utils/ids'
import { stillSpraying } from './open-guns'

type Db = Knex | Knex.Transaction

export type Extraction = 'running' | 'off' | 'unknown'

/** What the clearance of a booth follows from. Instants are epoch milliseconds. */
export interface ClearanceFacts {
  boothId: string
  boothName: string
  clearanceMin: string
  extraction: Extraction
  /** Last shot of an isocyanate mix, or the end of cleaning the gun after it. */
  lastShotAt: number | null
  /** First shot of isocyanates whose last one was not noted. */
  sprayingSince: number | null
  changes: ExtractionChangeRow[]
}

interface ExtractionChangeRow {
  at: number
  extraction: Extraction
  before: Extraction
}

interface BoothRow {
  id: string
  name: string
  clearance_min: string
  extraction: Extraction
  isocyanate_shot_at: Date | null
}

/** The facts of one booth or of all that are in use. */
export async function findClearanceFacts(boothId: string | null, db: Db): Promise<ClearanceFacts[]> {
  const query = db('booths').select<BoothRow[]>('id', 'name', 'clearance_min', 'extraction', 'isocyanate_shot_at').orderBy('id')
  void (boothId === null ? query.where({ active: true }) : query.where({ id: boothId }))
  const rows = await query
  const spraying = await sprayingSince(boothId, db)
  const facts: ClearanceFacts[] = []
  for (const row of rows) {
    const lastShotAt = msOrNull(row.isocyanate_shot_at)
    facts.push({
      boothId: row.id,
      boothName: row.name,
      clearanceMin: row.clearance_min,
      extraction: row.extraction,
      lastShotAt,
      sprayingSince: spraying.get(row.id) ?? null,
      changes: lastShotAt === null ? [] : await changesSince(row.id, lastShotAt, db),
    })
  }
  return facts
}

/** The first shot of each booth's pots with isocyanates that still stand and that a gun still sprays, as far as anybody noted. */
async function sprayingSince(boothId: string | null, db: Db): Promise<Map<string, number>> {
  const query = db('batch_current as c')
    .join('batch_events as f', 'f.batch_id', 'c.batch_id')
    .whereIn('c.state', ['fresh', 'closing', 'life-up', 'no-pot-life'])
    .whereNotNull('c.booth_id')
    .where('f.kind', 'first-spray')
    .whereRaw(stillSpraying)
    .whereExists((reacts) => reacts.select(db.raw('1')).from('batch_components as x').join('materials as a', 'a.id', 'x.material_id')
      .whereRaw('x.batch_id = c.batch_id AND a.contains_isocyanates = 1'))
    .groupBy('c.booth_id')
    .select<{ booth_id: string; since: Date }[]>('c.booth_id', db.raw('MIN(IF(c.amended, COALESCE(c.first_spray_at, f.at), f.at)) AS since'))
  if (boothId !== null) void query.where('c.booth_id', boothId)
  return new Map((await query).map(({ booth_id: id, since }) => [id, since.getTime()]))
}

interface ChangeRow {
  at: Date
  extraction: Extraction
  before: Extraction
}

/** What happened to the extraction from the last change before an instant on, in the order of time. */
async function changesSince(boothId: string, since: number, db: Db): Promise<ExtractionChangeRow[]> {
  const of = (when: '<=' | '>') => db('booth_extraction_changes').where({ booth_id: boothId }).where('at', when, toInstant(since)).select<ChangeRow[]>('at', 'extraction', 'before')
  const before = await of('<=').orderBy([{ column: 'at', order: 'desc' }, { column: 'created_at', order: 'desc' }]).limit(1)
  const after = await of('>').orderBy(['at', 'created_at', 'id'])
  return [...before, ...after].map((row) => ({ at: row.at.getTime(), extraction: row.extraction, before: row.before }))
}

/** Locks a booth and tells how its extraction is known to be and since when. Null: there is no such booth. */
export async function lockExtraction(boothId: string, trx: Knex.Transaction): Promise<{ extraction: Extraction; changedAt: number | null } | null> {
  const booth = await trx('booths').where({ id: boothId, active: true }).forUpdate().first<{ extraction: Extraction } | undefined>('extraction')
  if (!booth) return null
  const last = await trx('booth_extraction_changes').where({ booth_id: boothId }).max<{ at: Date | null }[]>('at as at').first()
  return { extraction: booth.extraction, changedAt: msOrNull(last?.at ?? null) }
}

/** Writes what the extraction does from `at` on (epoch milliseconds). */
export async function insertExtractionChange(
  change: { boothId: string; extraction: Extraction; before: Extraction; at: number; userId: string | null }, now: number, trx: Knex.Transaction,
): Promise<void> {
  await trx('booth_extraction_changes').insert({
    id: newId(), booth_id: change.boothId, extraction: change.extraction, before: change.before, at: toInstant(change.at), user_id: change.userId,
    created_at: toInstant(now),
  })
  await trx('booths').where({ id: change.boothId }).update({ extraction: change.extraction, version: trx.raw('version + 1'), updated_at: toInstant(now) })
}

/** Notes a shot of isocyanates in a booth, epoch milliseconds; an older one than is known changes nothing. */
export async function noteIsocyanateShot(boothId: string, at: number, trx: Knex.Transaction): Promise<void> {
  const instant = toInstant(at)
  await trx('booths').where({ id: boothId })
    .where((part) => part.whereNull('isocyanate_shot_at').orWhere('isocyanate_shot_at', '<', instant))
    .update({ isocyanate_shot_at: instant })
}
