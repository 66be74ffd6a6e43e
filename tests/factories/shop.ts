import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import type { Role } from '#shared/types/roles'

/** Ids of a tiny shop of its own: two booths, one mix, one job. Every code is random, so that many live in one schema. */
export interface Shop {
  /** Random word in every code of this shop. */
  mark: string
  users: Record<Role, string>
  boothId: string
  otherBoothId: string
  gunId: string
  scaleId: string
  benchId: string
  screenId: string
  /** 100 : 50 : 20 by weight, two hours of pot life at 20 °C. */
  mixId: string
  mixRevisionId: string
  /** The same base alone: nothing reacts. */
  plainMixRevisionId: string
  materials: { base: string; hardener: string; thinner: string }
  lots: { base: string; hardener: string; thinner: string }
  jobId: string
  jobStepId: string
  pieceIds: string[]
}

const at = new Date('2026-11-01T06:00:00.000Z')
const row = { created_at: at, updated_at: at }

/** Inserts the shop as the database's admin. */
export async function makeShop(admin: Knex): Promise<Shop> {
  const mark = randomUUID().slice(0, 8)
  const people = await makePeople(admin, mark)
  const places = await makePlaces(admin, mark)
  const materials = {
    base: await makeMaterial(admin, { code: `B-${mark}`, name: 'Polyurethane sealer', role: 'base' }),
    hardener: await makeMaterial(admin, { code: `H-${mark}`, name: 'Isocyanate hardener', role: 'hardener', contains_isocyanates: true }),
    thinner: await makeMaterial(admin, { code: `T-${mark}`, name: 'Thinner', role: 'thinner', chemistry: 'solvent' }),
  }
  const lots = {
    base: await makeLot(admin, materials.base, '5000'),
    hardener: await makeLot(admin, materials.hardener, '2500'),
    thinner: await makeLot(admin, materials.thinner, '1000'),
  }
  const mix = await makeMix(admin, mark, [[materials.base, 'base', '100'], [materials.hardener, 'hardener', '50'], [materials.thinner, 'thinner', '20']])
  const plain = await makeMix(admin, `${mark}-P`, [[materials.base, 'base', '100']])
  const job = await makeJob(admin, mark, mix.mixId)
  return { mark, users: people, ...places, ...mix, plainMixRevisionId: plain.mixRevisionId, materials, lots, ...job }
}

async function makePeople(admin: Knex, mark: string): Promise<Record<Role, string>> {
  const users = { sprayer: randomUUID(), foreman: randomUUID(), manager: randomUUID() }
  await admin('users').insert(Object.entries(users).map(([role, id]) => ({
    id, email: `${role}-${mark}@potbell.example`, name: `${role} ${mark}`, initials: 'XY', role, ...row,
  })))
  return users
}

async function makePlaces(admin: Knex, mark: string) {
  const ids = { boothId: randomUUID(), otherBoothId: randomUUID(), gunId: randomUUID(), scaleId: randomUUID(), benchId: randomUUID(), screenId: randomUUID() }
  await admin('booths').insert([
    { id: ids.boothId, name: `Booth ${mark}`, clearance_min: '30', ...row },
    { id: ids.otherBoothId, name: `Other booth ${mark}`, clearance_min: '30', ...row },
  ])
  await admin('guns').insert({
    id: ids.gunId, name: `Gun ${mark}`, kind: 'cup-gun', booth_id: ids.boothId, efficiency_flat_pct: '60', efficiency_frames_pct: '45',
    efficiency_sticks_pct: '30', residue_g: '60', ...row,
  })
  await admin('scales').insert({ id: ids.scaleId, name: `Scale ${mark}`, division_g: '0.1', capacity_g: '8000', ...row })
  await admin('devices').insert([
    { id: ids.benchId, kind: 'bench', name: `Bench ${mark}`, booth_id: null, scale_id: ids.scaleId, token_hash: tokenHash(), ...row },
    { id: ids.screenId, kind: 'screen', name: `Screen ${mark}`, booth_id: ids.boothId, scale_id: null, token_hash: tokenHash(), ...row },
  ])
  return ids
}

const tokenHash = () => (randomUUID() + randomUUID()).replaceAll('-', '')

interface MaterialInput {
  code: string
  name: string
  role: string
  chemistry?: string
  contains_isocyanates?: boolean
}

export async function makeMaterial(admin: Knex, material: MaterialInput): Promise<string> {
  const id = randomUUID()
  await admin('materials').insert({ id, chemistry: 'polyurethane', density_g_per_ml: '1.25', hazard_codes: '[]', ...material, ...row })
  return id
}

/** A lot with its stock booked in, in grams. */
export async function makeLot(admin: Knex, materialId: string, grams: string, columns: Record<string, unknown> = {}): Promise<string> {
  const id = randomUUID()
  await admin('lots').insert({ id, material_id: materialId, lot_number: `L-${id.slice(0, 8)}`, received_on: '2026-11-01', expires_on: '2027-11-01', ...columns, ...row })
  await admin('lot_movements').insert({ id: randomUUID(), lot_id: id, kind: 'received', grams, at, created_at: at })
  return id
}

type Component = [materialId: string, role: string, parts: string, columns?: Record<string, unknown>]

/** A mix by weight with its first revision: 120 min at 20 °C, halving per 10 °C, late from three quarters on. */
export async function makeMix(
  admin: Knex, mark: string, components: Component[], columns: Record<string, unknown> = {},
): Promise<{ mixId: string; mixRevisionId: string }> {
  const [mixId, mixRevisionId] = [randomUUID(), randomUUID()]
  await admin('mixes').insert({ id: mixId, code: `M-${mark}`, name: `Sealer ${mark}`, ...row })
  await admin('mix_revisions').insert({
    id: mixRevisionId, mix_id: mixId, number: 1, basis: 'weight', pot_life_min: '120', pot_life_reference_c: '20', halves_per_c: '10',
    late_from_pct: '75', created_at: at, ...columns,
  })
  await admin('mixes').where({ id: mixId }).update({ current_revision_id: mixRevisionId })
  await admin('mix_components').insert(components.map(([materialId, role, parts, more], index) => ({
    id: randomUUID(), mix_revision_id: mixRevisionId, position: index + 1, material_id: materialId, role, parts, reactive: role === 'hardener', ...more,
  })))
  return { mixId, mixRevisionId }
}

async function makeJob(admin: Knex, mark: string, mixId: string) {
  const [scheduleId, revisionId, stepId, jobId, jobStepId] = [randomUUID(), randomUUID(), randomUUID(), randomUUID(), randomUUID()]
  await admin('schedules').insert({ id: scheduleId, code: `S-${mark}`, name: `Schedule ${mark}`, ...row })
  await admin('schedule_revisions').insert({ id: revisionId, schedule_id: scheduleId, number: 1, state: 'released', released_at: at, ...row })
  await admin('schedule_steps').insert({
    id: stepId, schedule_revision_id: revisionId, position: 1, kind: 'coat', title: 'Sealer', mix_id: mixId, film_weight_gsm: '120',
    film_weight_is: 'deposited', coats: 2, faces: 'front', gun_shape: 'flat', coat_interval_min_min: '60', coat_interval_max_min: '240',
    overcoat_from_min: '120', overcoat_until_min: '720',
  })
  await admin('jobs').insert({ id: jobId, code: `J-${mark}`, title: `Fronts ${mark}`, schedule_revision_id: revisionId, state: 'running', ...row })
  const pieceIds = [randomUUID(), randomUUID(), randomUUID()]
  await admin('pieces').insert(pieceIds.map((id, index) => ({
    id, job_id: jobId, position: index + 1, label: `Front ${index + 1}`, length_mm: '580', width_mm: '720', quantity: 1, faces: 'front', area_m2: '0.4176', ...row,
  })))
  await admin('job_steps').insert({ id: jobStepId, job_id: jobId, schedule_step_id: stepId, position: 1, booth_id: null, gun_id: null, ...row })
  return { jobId, jobStepId, pieceIds }
}

/** An approval as a foreman would have given it a minute ago. */
export async function makeApproval(admin: Knex, shop: Shop, action: string, subject: string, now: number): Promise<string> {
  const id = randomUUID()
  await admin('approvals').insert({
    id, action, subject, reason: 'Nothing else on the shelf', approved_by_user_id: shop.users.foreman,
    created_at: new Date(now - 60_000), expires_at: new Date(now + 4 * 60_000),
  })
  return id
}
