import { newId } from '../../server/utils/ids'
import { toInstant } from '../../server/utils/rows'
import type { Mutation } from '../../server/utils/transactions'
import { born } from './found-places'
import { materials, protectionOf, type DemoMaterial } from './materials'
import { mixes, type DemoRevision } from './mixes'
import { schedules, type DemoStep } from './schedules'
import { the, type DemoShop, type MadeRevision, type MadeStep } from './shop'

const makers = ['Coatings wholesale North', 'Lacquer works East', 'Trade counter for finishes']

/** Every material, with what its safety data sheet says. */
export async function foundMaterials(m: Mutation): Promise<DemoShop['materials']> {
  const made = new Map(materials.map((material) => [material.code, { id: newId(), material }]))
  await m.trx('materials').insert(materials.map((material, index) => materialRow(material, the(made, material.code).id, makers[index % makers.length] ?? null, m.now)))
  return made
}

function materialRow(material: DemoMaterial, id: string, supplier: string | null, now: number) {
  const protection = protectionOf(material)
  return {
    id, code: material.code, name: material.name, role: material.role, chemistry: material.chemistry,
    contains_isocyanates: material.isocyanates ?? false, density_g_per_ml: material.density, solids_pct: material.solidsPct,
    volume_solids_pct: material.volumeSolidsPct ?? null, reacts_pct: material.reactsPct ?? null, voc_g_per_l: material.vocGPerL ?? null,
    voc_pct: material.vocPct ?? null, water_pct: material.waterPct ?? null, exempt_pct: null, flash_point_c: material.flashPointC ?? null,
    shelf_life_days: material.shelfDays, supplier, maker_code: `${material.code.replace('-', '')}-00`, price_per_kg: material.pricePerKg,
    signal_word: material.signal ?? null, hazard_codes: JSON.stringify(material.hazards), protection_mixing: protection.mixing,
    protection_spraying: protection.spraying, reorder_point_g: `${material.reorderG}`, ...born(now),
  }
}

/** Every mix in its first revision. */
export async function foundMixes(m: Mutation, shop: Pick<DemoShop, 'materials' | 'users'>): Promise<DemoShop['mixes']> {
  const made: DemoShop['mixes'] = new Map()
  for (const { code, name, revisions } of mixes) {
    const [first] = revisions
    if (!first) throw new Error(`the mix ${code} has no revision`)
    const id = newId()
    await m.trx('mixes').insert({ id, code, name, ...born(m.now) })
    made.set(code, { id, current: await addMixRevision(m, shop, id, 1, first) })
  }
  return made
}

/** Writes a revision and puts it in force. */
export async function addMixRevision(
  m: Mutation, shop: Pick<DemoShop, 'materials' | 'users'>, mixId: string, number: number, revision: DemoRevision,
): Promise<MadeRevision> {
  const id = newId()
  const reacts = revision.potLifeMin !== undefined || revision.potLifeTable !== undefined
  await m.trx('mix_revisions').insert({
    id, mix_id: mixId, number, basis: 'weight', pot_life_min: revision.potLifeMin ?? null,
    pot_life_reference_c: revision.potLifeMin === undefined ? null : '20',
    pot_life_table: revision.potLifeTable ? JSON.stringify(revision.potLifeTable) : null,
    induction_min: revision.inductionMin ?? '0', viscosity_cup: revision.viscosity?.cup ?? null,
    viscosity_seconds_min: revision.viscosity?.from ?? null, viscosity_seconds_max: revision.viscosity?.to ?? null,
    viscosity_at_c: revision.viscosity ? '20' : null, leftover_share_pct: revision.leftoverSharePct ?? null,
    pot_life_source: reacts ? 'Maker\'s data sheet' : null, notes: revision.notes ?? null,
    created_by_user_id: the(shop.users, 'RF').id, created_at: toInstant(m.now),
  })
  await m.trx('mix_components').insert(revision.parts.map((part, position) => ({
    id: newId(), mix_revision_id: id, position, material_id: the(shop.materials, part.material).id, role: part.role, parts: part.parts,
    parts_max: part.partsMax ?? null, tolerance_pct: part.tolerancePct ?? null, reactive: part.reactive ?? false,
  })))
  await m.trx('mixes').where('id', mixId).update({ current_revision_id: id, updated_at: toInstant(m.now) })
  return { id, revision }
}

/** Every schedule in its first revision, released. */
export async function foundSchedules(m: Mutation, shop: Pick<DemoShop, 'mixes' | 'users'>): Promise<DemoShop['schedules']> {
  const made: DemoShop['schedules'] = new Map()
  for (const { code, name, revisions } of schedules) {
    const [first] = revisions
    if (!first) throw new Error(`the schedule ${code} has no revision`)
    const id = newId()
    await m.trx('schedules').insert({ id, code, name, ...born(m.now) })
    made.set(code, { id, current: await addScheduleRevision(m, shop, id, 1, first) })
  }
  return made
}

/** Writes a released revision; the one before it is superseded. */
export async function addScheduleRevision(
  m: Mutation, shop: Pick<DemoShop, 'mixes' | 'users'>, scheduleId: string, number: number,
  { notes, steps }: { notes?: string, steps: readonly DemoStep[] },
): Promise<{ id: string, steps: MadeStep[] }> {
  const id = newId()
  const made = steps.map((step, position) => ({ id: newId(), position, step }))
  await m.trx('schedule_revisions').where({ schedule_id: scheduleId, state: 'released' })
    .update({ state: 'superseded', version: m.trx.raw('version + 1'), updated_at: toInstant(m.now) })
  await m.trx('schedule_revisions').insert({
    id, schedule_id: scheduleId, number, state: 'released', notes: notes ?? null, released_at: toInstant(m.now),
    released_by_user_id: the(shop.users, 'RF').id, ...born(m.now),
  })
  await m.trx('schedule_steps').insert(made.map(({ id: stepId, position, step }) => stepRow(step, stepId, id, position, shop)))
  return { id, steps: made }
}

function stepRow(step: DemoStep, id: string, revisionId: string, position: number, shop: Pick<DemoShop, 'mixes'>) {
  const isCoat = step.kind === 'coat'
  const [from, until] = step.overcoat ?? []
  const [sandFrom, sandUntil] = step.sanding ?? []
  return {
    id, schedule_revision_id: revisionId, position, kind: step.kind, title: step.title, grit: step.grit ?? null,
    mix_id: step.mix ? the(shop.mixes, step.mix).id : null,
    film_weight_min_gsm: step.gsm?.[0] ?? null, film_weight_gsm: step.gsm?.[1] ?? null, film_weight_max_gsm: step.gsm?.[2] ?? null,
    film_weight_is: step.gsmIs ?? null, coats: step.coats ?? null, passes: step.passes ?? null, faces: isCoat ? 'all' : null,
    gun_shape: step.shape ?? null, max_pressure_bar: step.maxBar ?? null,
    coat_interval_min_min: step.interval?.[0] ?? null, coat_interval_max_min: step.interval?.[1] ?? null,
    overcoat_from_min: from ?? null, overcoat_until_min: until ?? null, sand_from_min: sandFrom ?? null, sand_until_min: sandUntil ?? null,
    flash_off_min: step.flashOff ?? null, dry_min: step.dry ?? null, dry_place: step.dryPlace ?? null,
    lay_flat: step.layFlat ?? false, do_not_sand: step.doNotSand ?? false, keep_from_draughts: step.keepFromDraughts ?? false,
    cautions: step.cautions ?? null, instructions: step.instructions ?? null,
  }
}
