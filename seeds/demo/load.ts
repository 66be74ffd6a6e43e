import type { Knex } from 'knex'
import { readShop } from '../../server/repositories/settings'
import { decimalOf } from '../../server/utils/rows'
import { materials } from './materials'
import { mixes } from './mixes'
import { booths, guns, scales } from './places'
import type { DemoShop } from './shop'
import type { Lot } from './stores'

interface Named {
  id: string
  name: string
}

/**
 * Finds the demo shop's own things in the database by their names. What was renamed, archived or changed since is left
 * out: the demo no longer touches it.
 */
export async function loadShop(db: Knex): Promise<DemoShop> {
  const { zone } = await readShop(db)
  return {
    zone,
    users: await loadUsers(db),
    booths: byName(booths, await active(db, 'booths')),
    guns: byName(guns, await active(db, 'guns')),
    scales: byName(scales, await active(db, 'scales')),
    materials: await loadMaterials(db),
    mixes: await loadMixes(db),
    schedules: new Map(),
  }
}

const active = (db: Knex, table: 'booths' | 'guns' | 'scales') => db(table).where('active', true).select<Named[]>('id', 'name')

function byName<K>(list: readonly { key: K, name: string }[], rows: readonly Named[]): Map<K, string> {
  return new Map(list.flatMap(({ key, name }) => {
    const row = rows.find((one) => one.name === name)
    return row ? [[key, row.id] as const] : []
  }))
}

async function loadUsers(db: Knex): Promise<DemoShop['users']> {
  const rows = await db('users').where('active', true).select<{ id: string, email: string, name: string, initials: string, role: 'sprayer' | 'foreman' | 'manager' }[]>('id', 'email', 'name', 'initials', 'role')
  return new Map(rows.map((row) => [row.initials, { ...row, sessionId: '' }]))
}

async function loadMaterials(db: Knex): Promise<DemoShop['materials']> {
  const rows = await db('materials').whereNull('archived_at').select<{ id: string, code: string }[]>('id', 'code')
  return new Map(rows.flatMap(({ id, code }) => {
    const material = materials.find((one) => one.code === code)
    return material ? [[code, { id, material }] as const] : []
  }))
}

async function loadMixes(db: Knex): Promise<DemoShop['mixes']> {
  const rows = await db('mixes as m').join('mix_revisions as r', 'r.id', 'm.current_revision_id').whereNull('m.archived_at')
    .select<{ id: string, code: string, revision_id: string, number: number }[]>('m.id', 'm.code', 'r.id as revision_id', 'r.number')
  return new Map(rows.flatMap(({ id, code, revision_id: revisionId, number }) => {
    const revision = mixes.find((one) => one.code === code)?.revisions[number - 1]
    return revision ? [[code, { id, current: { id: revisionId, revision } }] as const] : []
  }))
}

/** What is left of each lot, in whole tenths of a gram rounded down. */
export async function loadLots(db: Knex): Promise<Lot[]> {
  const rows = await db('lots as l').join('materials as m', 'm.id', 'l.material_id').join('lot_movements as v', 'v.lot_id', 'l.id')
    .whereIn('l.state', ['sealed', 'in-use']).groupBy('l.id', 'm.code', 'l.expires_on')
    .select<{ id: string, code: string, expires_on: string | null, stock: string }[]>('l.id', 'm.code', 'l.expires_on', db.raw('SUM(v.grams) AS stock'))
  return rows.map(({ id, code, expires_on: expiresOn, stock }) => ({
    id, materialCode: code, expiresOn: expiresOn ?? '9999-12-31', left: wholeTenths(decimalOf(stock)),
  }))
}

function wholeTenths(grams: string): number {
  const match = /^(\d+)(?:\.(\d))?/.exec(grams)
  return match ? parseInt(match[1] ?? '0', 10) * 10 + parseInt(match[2] ?? '0', 10) : 0
}
