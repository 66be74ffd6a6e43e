import type { Knex } from 'knex'
import type * as z from 'zod/mini'
import { safeParse } from 'zod/mini'
import { BoothBody, GunBody, MixingCupBody, ScaleBody } from '#shared/schemas/shop-edit'
import type { Booth, Gun, MixingCup, Scale } from '#shared/schemas/shop'
import { isActive } from '../repositories/devices'
import { deleteThing, hasLivePots, holdThing, insertThing, updateThing, type ShopTable } from '../repositories/shop-write'
import { inUse, versionConflict, uniquely } from '../utils/conflict'
import type { Canonical } from '../utils/canonical'
import type { Context } from '../utils/context'
import { invalid, type FieldFault } from '../utils/errors'
import { newId } from '../utils/ids'
import { mutate, type Mutation } from '../utils/transactions'
import { settleClearance } from './booth-air'
import { readBooth, readGun, readMixingCup, readScale } from './shop'

/** What is told where it is there already. */
const taken = ['name', 'This name is taken, perhaps by one that was taken out of use.'] as const

interface Thing {
  id: string
  version: number
  active: boolean
}

/** How one kind of thing that a shop works with is read, written and kept. */
export interface Kind<Body extends { name: string }, T extends Thing> {
  /** Word of its subjects and of its audited actions. */
  word: 'booth' | 'gun' | 'scale' | 'mixing-cup'
  table: ShopTable
  body: z.ZodMiniType<Body>
  /** @throws Refusal 404 when it is not there */
  read: (ctx: Context, id: string, db: Knex | Knex.Transaction) => Promise<T>
  toBody: (thing: T) => Body
  toRow: (body: Body) => Record<string, unknown>
  /** What is wrong with what the body refers to. */
  faults?: (body: Body, before: T | null, trx: Knex.Transaction) => Promise<FieldFault[]>
  /** Why it may not be taken out of use now, or null. */
  keptFor?: (thing: T, trx: Knex.Transaction) => Promise<string | null>
  /** What follows from a change. */
  after?: (m: Mutation, id: string) => Promise<void>
}

/** Stands where a booth's clearance was not measured. Minutes; the engine's own figure. */
const unmeasuredClearanceMin = '30'

export const boothKind: Kind<BoothBody, Booth> = {
  word: 'booth',
  table: 'booths',
  body: BoothBody,
  read: readBooth,
  toBody: ({ name, clearanceMin, clearanceMeasured }) => ({ name, clearanceMeasured, clearanceMin }),
  toRow: ({ name, clearanceMin, clearanceMeasured }) =>
    ({ name, clearance_measured: clearanceMeasured, clearance_min: clearanceMeasured ? clearanceMin : unmeasuredClearanceMin }),
  keptFor: async ({ id }, trx) => (await hasLivePots(id, trx)) ? 'Pots of this booth are alive. Empty them first.' : null,
  // Another clearance time moves the moment at which the booth may be entered.
  after: settleClearance,
}

export const gunKind: Kind<GunBody, Gun> = {
  word: 'gun',
  table: 'guns',
  body: GunBody,
  read: readGun,
  toBody: ({ id: _id, active: _active, version: _version, boothName: _boothName, ...body }) => body,
  toRow: (gun) => ({
    name: gun.name, kind: gun.kind, nozzle_mm: gun.nozzleMm, booth_id: gun.boothId, efficiency_flat_pct: gun.efficiencyFlatPct,
    efficiency_frames_pct: gun.efficiencyFramesPct, efficiency_sticks_pct: gun.efficiencySticksPct, efficiency_measured: gun.efficiencyMeasured,
    residue_g: gun.residueG, smallest_fill_g: gun.smallestFillG, flow_g_per_min: gun.flowGPerMin, pace_m2_per_h: gun.paceM2PerH,
  }),
  async faults({ boothId }, before, trx) {
    if (boothId === null || boothId === before?.boothId || await isActive('booths', boothId, trx)) return []
    return [{ path: 'boothId', message: 'There is no such booth in use.' }]
  },
}

export const scaleKind: Kind<ScaleBody, Scale> = {
  word: 'scale',
  table: 'scales',
  body: ScaleBody,
  read: readScale,
  toBody: ({ id: _id, active: _active, version: _version, nextCheckInDays: _days, ...body }) => body,
  toRow: (scale) => ({
    name: scale.name, source: scale.source, division_g: scale.divisionG, capacity_g: scale.capacityG, mpe_g: scale.mpeG,
    accuracy_class: scale.accuracyClass, verification_interval_g: scale.verificationIntervalG, next_check_on: scale.nextCheckOn,
  }),
}

export const mixingCupKind: Kind<MixingCupBody, MixingCup> = {
  word: 'mixing-cup',
  table: 'mixing_cups',
  body: MixingCupBody,
  read: readMixingCup,
  toBody: ({ name, capacityMl, fillLineMl }) => ({ name, capacityMl, fillLineMl }),
  toRow: ({ name, capacityMl, fillLineMl }) => ({ name, capacity_ml: capacityMl, fill_line_ml: fillLineMl }),
}

/** Benches and screens read the shop anew when they hear of it. */
const told = (word: string, id: string) => ({ type: 'shop', subject: `${word}:${id}`, boothId: null, payload: { id } })

/** @throws Refusal 400 for what it refers to, 409 for a name that is taken */
export function createThing<Body extends { name: string }, T extends Thing>(ctx: Context, kind: Kind<Body, T>, body: Body): Promise<T> {
  return mutate(ctx, async (m) => {
    const faults = await kind.faults?.(body, null, m.trx) ?? []
    if (faults.length > 0) throw invalid(faults)
    const id = newId()
    await uniquely(...taken, () => insertThing(kind.table, id, kind.toRow(body), m.now, m.trx))
    m.audit({ action: `${kind.word}.created`, subject: `${kind.word}:${id}`, facts: factsOf(body) })
    m.publish(told(kind.word, id))
    return kind.read(ctx, id, m.trx)
  })
}

/**
 * Changes the fields that are sent and leaves the others; `active: false` takes it out of use, where it stays readable in
 * what was done with it.
 *
 * @throws Refusal 404, 409 `version-conflict` with what stands now, 409 `in-use`, 409 `duplicate`, 400 for what does not go together
 */
export function changeThing<Body extends { name: string }, T extends Thing>(
  ctx: Context, kind: Kind<Body, T>, id: string, { version, active, ...fields }: { version: number, active?: boolean | undefined },
): Promise<T> {
  return mutate(ctx, async (m) => {
    const before = await held(ctx, kind, id, m.trx)
    if (before.version !== version) throw await versionConflict(before, `${kind.word}:${id}`, m.trx)
    const body = await merged(kind, before, fields, m)
    const stays = active ?? before.active
    const reason = before.active && !stays ? await kind.keptFor?.(before, m.trx) ?? null : null
    if (reason !== null) throw inUse(reason)
    await uniquely(...taken, () => updateThing(kind.table, id, { ...kind.toRow(body), active: stays }, m.now, m.trx))
    const [from, to] = differences({ ...kind.toBody(before), active: before.active }, { ...body, active: stays })
    await kind.after?.(m, id)
    m.audit({ action: `${kind.word}.changed`, subject: `${kind.word}:${id}`, facts: { from, to } })
    m.publish(told(kind.word, id))
    return kind.read(ctx, id, m.trx)
  })
}

/** @throws Refusal 404, 409 `in-use` where something refers to it: it can be taken out of use instead */
export async function removeThing<Body extends { name: string }, T extends Thing>(ctx: Context, kind: Kind<Body, T>, id: string): Promise<void> {
  await mutate(ctx, async (m) => {
    const before = await held(ctx, kind, id, m.trx)
    if (!(await deleteThing(kind.table, id, m.trx))) throw inUse('It is part of what was done or planned. Take it out of use instead.')
    m.audit({ action: `${kind.word}.deleted`, subject: `${kind.word}:${id}`, facts: factsOf(kind.toBody(before)) })
    m.publish(told(kind.word, id))
    return null
  })
}

async function held<Body extends { name: string }, T extends Thing>(ctx: Context, kind: Kind<Body, T>, id: string, trx: Knex.Transaction): Promise<T> {
  await holdThing(kind.table, id, trx)
  return kind.read(ctx, id, trx)
}

/** What is there with what was sent, checked as a whole. */
async function merged<Body extends { name: string }, T extends Thing>(kind: Kind<Body, T>, before: T, fields: object, m: Mutation): Promise<Body> {
  const parsed = safeParse(kind.body, { ...kind.toBody(before), ...fields })
  if (!parsed.success) throw invalid(parsed.error.issues.map(({ path, message }) => ({ path: path.join('.'), message })))
  const faults = await kind.faults?.(parsed.data, before, m.trx) ?? []
  if (faults.length > 0) throw invalid(faults)
  return parsed.data
}

/** What is audited of a thing: no names. */
function factsOf(body: object): Canonical {
  return Object.fromEntries(Object.entries(body).filter(([key]) => key !== 'name')) as Canonical
}

/** Members that differ, as they were and as they are; of a name only that it did. */
function differences(before: Record<string, unknown>, after: Record<string, unknown>): [Canonical, Canonical] {
  const keys = Object.keys(after).filter((key) => before[key] !== after[key])
  const pick = (from: Record<string, unknown>) => Object.fromEntries(keys.map((key) => [key, key === 'name' ? 'changed' : from[key] ?? null])) as Canonical
  return [pick(before), pick(after)]
}
