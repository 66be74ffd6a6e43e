import type { Knex } from 'knex'
import type { Device, DeviceCreateBody } from '#shared/schemas/devices'
import { isoOf, isoOrNull, toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

interface Row {
  id: string
  kind: 'bench' | 'screen'
  name: string
  booth_id: string | null
  booth_name: string | null
  scale_id: string | null
  scale_name: string | null
  last_seen_at: Date | null
  created_at: Date
  version: number
}

const toDevice = (row: Row): Device => ({
  id: row.id,
  kind: row.kind,
  name: row.name,
  boothId: row.booth_id,
  boothName: row.booth_name,
  scaleId: row.scale_id,
  scaleName: row.scale_name,
  lastSeenAt: isoOrNull(row.last_seen_at),
  createdAt: isoOf(row.created_at),
  version: row.version,
})

const select = (db: Db) =>
  db('devices as d')
    .leftJoin('booths as b', 'b.id', 'd.booth_id')
    .leftJoin('scales as s', 's.id', 'd.scale_id')
    .whereNull('d.revoked_at')
    .select<Row[]>(
      'd.id', 'd.kind', 'd.name', 'd.booth_id', 'b.name as booth_name', 'd.scale_id', 's.name as scale_name',
      'd.last_seen_at', 'd.created_at', 'd.version',
    )

/** All devices that are not revoked, by name. A shop has a handful. */
export async function listDevices(db: Db): Promise<Device[]> {
  const rows = await select(db).orderBy(['d.name', 'd.id'])
  return rows.map(toDevice)
}

export async function getDevice(id: string, db: Db): Promise<Device | null> {
  const [row] = await select(db).where('d.id', id)
  return row ? toDevice(row) : null
}

export async function insertDevice(id: string, body: DeviceCreateBody, tokenHash: string, now: number, db: Db): Promise<void> {
  const at = toInstant(now)
  await db('devices').insert({
    id, kind: body.kind, name: body.name, booth_id: body.boothId, scale_id: body.scaleId,
    token_hash: tokenHash, created_at: at, updated_at: at,
  })
}

/** Returns how many rows changed: 0 when it was revoked before or never was. */
export function revokeDevice(id: string, now: number, db: Db): Promise<number> {
  const at = toInstant(now)
  return db('devices').where({ id }).whereNull('revoked_at').update({ revoked_at: at, updated_at: at, version: db.raw('version + 1') })
}

/** True when the id is of a row that may still be chosen. */
export async function isActive(table: 'booths' | 'scales', id: string, db: Db): Promise<boolean> {
  return (await db(table).where({ id, active: true }).first('id')) !== undefined
}
