import { demoPassword } from '#shared/utils/demo'
import { shopDate } from '#shared/utils/zone'
import { newId } from '../../server/utils/ids'
import { hashSecret } from '../../server/utils/password'
import { toInstant } from '../../server/utils/rows'
import type { Mutation } from '../../server/utils/transactions'
import { booths, guns, mixingCups, people, scales, shop, workingHours } from './places'
import { the, type DemoShop } from './shop'

const dayMs = 86_400_000

/** The two columns that every changing row has. */
export const born = (now: number) => ({ created_at: toInstant(now), updated_at: toInstant(now) })

const dayAfter = (now: number, days: number) => shopDate(now + days * dayMs, shop.zone)

/** The shop's own settings; `demo` marks it as the invented one. */
export async function foundSettings(m: Mutation): Promise<void> {
  const values = { shop, 'working-hours': workingHours }
  await m.trx('settings').insert(Object.entries(values).map(([name, value]) => ({ name, value: JSON.stringify(value), ...born(m.now) })))
}

/** The people; those who may sign in all have the demo's public password. */
export async function foundPeople(m: Mutation): Promise<DemoShop['users']> {
  const hashes = await Promise.all(people.map(({ signsIn }) => (signsIn ? hashSecret(demoPassword) : null)))
  const users = new Map(people.map(({ key, email, name, role }) =>
    [key as string, { id: newId(), role, name, initials: key, email, sessionId: '' }]))
  await m.trx('users').insert(people.map((person, index) => ({
    id: the(users, person.key).id, email: person.email, name: person.name, initials: person.key, role: person.role,
    password_hash: hashes[index] ?? null, demo_password: person.signsIn,
    isocyanate_training_until: person.trainedDays === null ? null : dayAfter(m.now, person.trainedDays), ...born(m.now),
  })))
  return users
}

/** Booths, guns, scales and mixing cups. */
export async function foundPlaces(m: Mutation): Promise<Pick<DemoShop, 'booths' | 'guns' | 'scales'>> {
  const made = {
    booths: new Map(booths.map(({ key }) => [key, newId()] as const)),
    guns: new Map(guns.map(({ key }) => [key, newId()] as const)),
    scales: new Map(scales.map(({ key }) => [key, newId()] as const)),
  }
  await m.trx('booths').insert(booths.map(({ key, name, clearanceMin, measured, extraction }) => ({
    id: the(made.booths, key), name, clearance_min: clearanceMin, clearance_measured: measured, extraction, ...born(m.now),
  })))
  await m.trx('guns').insert(guns.map((gun) => ({
    id: the(made.guns, gun.key), name: gun.name, kind: gun.kind, nozzle_mm: gun.nozzle, booth_id: the(made.booths, gun.booth),
    efficiency_flat_pct: gun.flat, efficiency_frames_pct: gun.frames, efficiency_sticks_pct: gun.sticks, efficiency_measured: gun.measured,
    residue_g: gun.residue, smallest_fill_g: gun.fill, flow_g_per_min: gun.flow, pace_m2_per_h: gun.pace, ...born(m.now),
  })))
  await m.trx('scales').insert(scales.map((scale) => ({
    id: the(made.scales, scale.key), name: scale.name, source: scale.source, division_g: scale.division, capacity_g: scale.capacity, mpe_g: scale.mpe,
    accuracy_class: scale.class, verification_interval_g: scale.interval, next_check_on: dayAfter(m.now, scale.checkDays + 84), ...born(m.now),
  })))
  await m.trx('mixing_cups').insert(mixingCups.map(({ name, capacity, fillLine }) => ({
    id: newId(), name, capacity_ml: capacity, fill_line_ml: fillLine, ...born(m.now),
  })))
  return made
}
