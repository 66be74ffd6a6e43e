import type { Knex } from 'knex'
import type { ChemistryRule } from '#shared/engine/chemistry-clash'
import { D } from '#shared/engine/decimal'
import type { DraftBody } from '#shared/schemas/drafts'
import { msOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** A booth recorded as clean. `at` epoch milliseconds. */
export interface Cleaning {
  at: number
  userName: string
}

interface CleaningRow {
  cleaned_at: Date
  name: string
}

/** The last cleaning of a booth at or before an instant (epoch milliseconds). */
export async function lastCleaning(boothId: string, until: number, db: Db): Promise<Cleaning | null> {
  const row = await db('booth_cleanings as c').join('users as u', 'u.id', 'c.user_id')
    .where('c.booth_id', boothId).where('c.cleaned_at', '<=', toInstant(until))
    .orderBy([{ column: 'c.cleaned_at', order: 'desc' }, { column: 'c.id', order: 'desc' }])
    .first<CleaningRow | undefined>('c.cleaned_at', 'u.name')
  return row ? { at: row.cleaned_at.getTime(), userName: row.name } : null
}

/** When a booth was last recorded clean at or before an instant, and next after it (epoch milliseconds); null where it was not. */
export async function cleaningsAround(boothId: string, at: number, db: Db): Promise<{ last: number | null, next: number | null }> {
  const edge = (most: 'MAX' | 'MIN', side: '<=' | '>') =>
    db('booth_cleanings').where({ booth_id: boothId }).where('cleaned_at', side, toInstant(at)).select(db.raw(`${most}(cleaned_at)`))
  const row = await db.first<{ last_at: Date | null, next_at: Date | null }>(edge('MAX', '<=').as('last_at'), edge('MIN', '>').as('next_at'))
  return { last: msOrNull(row.last_at), next: msOrNull(row.next_at) }
}

export async function insertCleaning(cleaning: { id: string, boothId: string, userId: string, at: number }, db: Db): Promise<void> {
  const at = toInstant(cleaning.at)
  await db('booth_cleanings').insert({ id: cleaning.id, booth_id: cleaning.boothId, user_id: cleaning.userId, cleaned_at: at, created_at: at })
}

/** Which revision of a mix was last made for a booth, and when (epoch milliseconds). */
export interface BoothMix {
  mixRevisionId: string
  at: number
}

interface MixRow {
  mix_revision_id: string
  last_at: Date
}

/** The longest that a pot mixed before a cleaning may stand and be sprayed after it. */
export const longestPotMs = 60 * 86_400_000

/**
 * Every mix that was made for a booth after `from` and before `to` (epoch milliseconds; null: from ever, until now),
 * with those made before `from` whose pot was still not emptied then. A pot counts whether or not anybody tapped its
 * first spray: the careful side.
 */
export async function mixesInBooth(boothId: string, from: number | null, to: number | null, db: Db): Promise<BoothMix[]> {
  // The booth as it is known now: a pot whose booth was put right counts where it really was.
  const made = db('batch_current as c').join('batches as b', 'b.id', 'c.batch_id').where('c.booth_id', boothId).where('b.outcome', 'mixed')
    .groupBy('b.mix_revision_id').select<MixRow[]>('b.mix_revision_id', db.raw('MAX(c.mixed_at) AS last_at'))
  if (from !== null) void made.where('c.mixed_at', '>', toInstant(from))
  if (to !== null) void made.where('c.mixed_at', '<=', toInstant(to))
  const rows = [...await made, ...(from === null ? [] : await leftStanding(boothId, from, db))]
  return rows.map(row => ({ mixRevisionId: row.mix_revision_id, at: row.last_at.getTime() }))
}

async function leftStanding(boothId: string, from: number, db: Db): Promise<MixRow[]> {
  return await db('batch_current as c').join('batches as b', 'b.id', 'c.batch_id')
    .whereNot('c.state', 'stopped').where('c.booth_id', boothId)
    .where('c.mixed_at', '>', toInstant(from - longestPotMs)).where('c.mixed_at', '<=', toInstant(from))
    .where(part => part.whereNull('c.closed_at').orWhere('c.closed_at', '>', toInstant(from)).orWhere('c.last_spray_at', '>', toInstant(from)))
    .select<MixRow[]>('b.mix_revision_id', 'c.mixed_at as last_at')
}

interface DraftRow {
  mix_revision_id: string
  body: string
  updated_at: Date
}

/** An empty cup that nobody touched for so long keeps no booth, and asks for it anew when somebody goes on with it. */
export const emptyCupMs = 86_400_000

/** What is being mixed for a booth now (epoch milliseconds) in other cups than `draftId`. */
export async function mixesBegunFor(boothId: string, draftId: string, now: number, db: Db): Promise<BoothMix[]> {
  const rows = await db('batch_drafts').where({ booth_id: boothId, state: 'open' }).whereNot('id', draftId)
    .select<DraftRow[]>('mix_revision_id', 'body', 'updated_at')
  return rows.filter(row => isStillMixed(row, now)).map(row => ({ mixRevisionId: row.mix_revision_id, at: row.updated_at.getTime() }))
}

/** What was stopped is waste and comes to no booth; a tin that was only named is not in the cup. */
function isStillMixed({ body, updated_at: touchedAt }: DraftRow, now: number): boolean {
  const { components, stopped } = JSON.parse(body) as Pick<DraftBody, 'components' | 'stopped'>
  if (stopped) return false
  return touchedAt.getTime() > now - emptyCupMs || components.some(({ pours }) => pours.some(({ grams }) => new D(grams).gt(0)))
}

/** A revision's name and the chemistries of all its components. */
export interface MixChemistry {
  mixRevisionId: string
  mixName: string
  chemistry: string
}

export async function chemistriesOf(revisionIds: readonly string[], db: Db): Promise<MixChemistry[]> {
  if (revisionIds.length === 0) return []
  const rows = await db('mix_components as c')
    .join('mix_revisions as r', 'r.id', 'c.mix_revision_id').join('mixes as x', 'x.id', 'r.mix_id').join('materials as m', 'm.id', 'c.material_id')
    .whereIn('c.mix_revision_id', [...revisionIds])
    .distinct<{ mix_revision_id: string, name: string, chemistry: string }[]>('c.mix_revision_id', 'x.name', 'm.chemistry')
  return rows.map(row => ({ mixRevisionId: row.mix_revision_id, mixName: row.name, chemistry: row.chemistry }))
}

/**
 * Which chemistries may not follow each other in a booth.
 *
 * @param blocking only rules that block one of these chemistries; without it, all
 */
export async function listBoothRules(db: Db, blocking?: readonly string[]): Promise<(ChemistryRule & { scope: 'booth' })[]> {
  const query = db('chemistry_rules').where({ scope: 'booth' }).orderBy(['first_chemistry', 'second_chemistry'])
    .select<{ first_chemistry: string, second_chemistry: string, verdict: ChemistryRule['verdict'], advice: string }[]>(
      'first_chemistry', 'second_chemistry', 'verdict', 'advice',
    )
  if (blocking) void query.where({ verdict: 'blocked' }).where((part) => part.whereIn('first_chemistry', [...blocking]).orWhereIn('second_chemistry', [...blocking]))
  const rows = await query
  return rows.map(row => ({ scope: 'booth', first: row.first_chemistry, second: row.second_chemistry, verdict: row.verdict, advice: row.advice }))
}

export async function findBoothName(id: string, db: Db): Promise<string | null> {
  const row = await db('booths').where({ id }).first<{ name: string } | undefined>('name')
  return row?.name ?? null
}
