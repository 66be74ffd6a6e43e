import type { Knex } from 'knex'
import type { MixRevisionFields } from '#shared/schemas/mixes'
import { newId } from '../utils/ids'
import { toInstant } from '../utils/rows'

export async function insertMix(id: string, { code, name }: { code: string, name: string }, now: number, trx: Knex.Transaction): Promise<void> {
  const at = toInstant(now)
  await trx('mixes').insert({ id, code, name, created_at: at, updated_at: at })
}

/** Holds a mix until the transaction ends, so that its revisions are numbered one by one. False where there is none. */
export async function lockMix(id: string, trx: Knex.Transaction): Promise<boolean> {
  return (await trx('mixes').where({ id }).forUpdate().first('id')) !== undefined
}

/** The number of the mix's next revision. The mix must be locked. */
export async function nextRevisionNumber(mixId: string, trx: Knex.Transaction): Promise<number> {
  const [row] = await trx('mix_revisions').where({ mix_id: mixId }).max<{ last: number | null }[]>({ last: 'number' })
  return (row?.last ?? 0) + 1
}

/** Writes a revision with its components in pouring order and puts it in force. */
export async function insertRevision(
  mixId: string, number: number, fields: MixRevisionFields, userId: string | null, now: number, trx: Knex.Transaction,
): Promise<string> {
  const id = newId()
  const at = toInstant(now)
  await trx('mix_revisions').insert({
    id, mix_id: mixId, number, basis: fields.basis, pot_life_min: fields.potLifeMin, pot_life_reference_c: fields.potLifeReferenceC,
    pot_life_table: fields.potLifeTable === null ? null : JSON.stringify(fields.potLifeTable), halves_per_c: fields.halvesPerC,
    late_from_pct: fields.lateFromPct, induction_min: fields.inductionMin, viscosity_cup: fields.viscosity?.cup ?? null,
    viscosity_seconds_min: fields.viscosity?.secondsMin ?? null, viscosity_seconds_max: fields.viscosity?.secondsMax ?? null,
    viscosity_at_c: fields.viscosity?.atC ?? null, density_g_per_ml: fields.densityGPerMl, volume_solids_pct: fields.volumeSolidsPct,
    leftover_share_pct: fields.leftoverSharePct, pot_life_source: fields.potLifeSource, notes: fields.notes, created_by_user_id: userId, created_at: at,
  })
  await trx('mix_components').insert(fields.components.map((component, position) => ({
    id: newId(), mix_revision_id: id, position, material_id: component.materialId, role: component.role, parts: component.parts,
    parts_max: component.partsMax, tolerance_pct: component.tolerancePct, reactive: component.reactive,
  })))
  await trx('mixes').where({ id: mixId }).update({ current_revision_id: id, updated_at: at, version: trx.raw('version + 1') })
  return id
}

interface MixColumns {
  code?: string | undefined
  name?: string | undefined
  archived?: boolean | undefined
}

/** Writes what is given. The row must be locked. */
export async function updateMix(id: string, { code, name, archived }: MixColumns, now: number, trx: Knex.Transaction): Promise<void> {
  const at = toInstant(now)
  await trx('mixes').where({ id }).update({
    ...(code === undefined ? {} : { code }), ...(name === undefined ? {} : { name }),
    ...(archived === undefined ? {} : { archived_at: archived ? at : null }), updated_at: at, version: trx.raw('version + 1'),
  })
}
