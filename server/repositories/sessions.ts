import type { Knex } from 'knex'
import type { Role } from '#shared/types/roles'
import type { DevicePrincipal, UserPrincipal } from '../utils/context'
import { toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

interface UserRow {
  id: string
  email: string
  name: string
  initials: string
  role: Role
  password_hash: string | null
  must_change_password: number
}

/** What is needed to check a password. Inactive people are not found. */
export async function findSignInUser(email: string, db: Db): Promise<UserRow | undefined> {
  return signInUsers(db).where({ email }).first()
}

const signInUsers = (db: Db): Knex.QueryBuilder<UserRow, UserRow[]> =>
  db('users').where({ active: true }).select('id', 'email', 'name', 'initials', 'role', 'password_hash', 'must_change_password')

/**
 * The person whose password was checked, held until the transaction ends; undefined where the password, its account or
 * the address was changed since.
 *
 * @param checked as it was read when the password was checked
 */
export async function holdSignInUser(checked: Pick<UserRow, 'email' | 'password_hash'>, trx: Knex.Transaction): Promise<UserRow | undefined> {
  return signInUsers(trx).where({ email: checked.email, password_hash: checked.password_hash }).forUpdate().first()
}

interface NewSession {
  id: string
  userId: string
  deviceId: string | null
  now: number
  expiresAt: number
}

export async function insertSession(session: NewSession, db: Db): Promise<void> {
  const now = toInstant(session.now)
  await db('sessions').insert({
    id: session.id,
    user_id: session.userId,
    device_id: session.deviceId,
    created_at: now,
    last_seen_at: now,
    expires_at: toInstant(session.expiresAt),
  })
}

/** Ends one session; returns how many were still open. */
export function endSession(id: string, reason: string, now: number, db: Db): Promise<number> {
  return db('sessions').where({ id }).whereNull('ended_at').update({ ended_at: toInstant(now), ended_reason: reason })
}

/** The person of an open session of an active account, or null. Asked at every request. */
export async function findSessionUser(id: string, db: Db): Promise<UserPrincipal | null> {
  const row = await db('sessions as s')
    .join('users as u', 'u.id', 's.user_id')
    .where('s.id', id)
    .whereNull('s.ended_at')
    .where('s.expires_at', '>', db.raw('UTC_TIMESTAMP(3)'))
    .where('u.active', true)
    .first<(Omit<UserRow, 'password_hash'> & { stale: number }) | undefined>(
      'u.id', 'u.email', 'u.name', 'u.initials', 'u.role', 'u.must_change_password',
      db.raw('(s.last_seen_at < UTC_TIMESTAMP(3) - INTERVAL 5 MINUTE) as stale'),
    )
  if (!row) return null
  if (Number(row.stale) === 1) await touchSession(id, db)
  return {
    id: row.id, email: row.email, name: row.name, initials: row.initials, role: row.role, sessionId: id, mustChangePassword: row.must_change_password === 1,
  }
}

/** Use of a session pushes its end out again, at most once in five minutes. */
async function touchSession(id: string, db: Db): Promise<void> {
  await db('sessions').where({ id }).update({
    last_seen_at: db.raw('UTC_TIMESTAMP(3)'),
    expires_at: db.raw(`UTC_TIMESTAMP(3) + INTERVAL ${sessionHours} HOUR`),
  })
}

/** A session ends this long after it was last used. */
export const sessionHours = 12

interface DeviceRow {
  id: string
  kind: 'bench' | 'screen'
  name: string
  booth_id: string | null
  scale_id: string | null
  stale: number
}

/** The enrolled device with this token, or null when it is unknown or revoked. */
export async function findDevice(tokenHash: string, db: Db): Promise<DevicePrincipal | null> {
  const row = await db('devices')
    .where({ token_hash: tokenHash })
    .whereNull('revoked_at')
    .first<DeviceRow | undefined>(
      'id', 'kind', 'name', 'booth_id', 'scale_id',
      db.raw('(last_seen_at IS NULL OR last_seen_at < UTC_TIMESTAMP(3) - INTERVAL 5 MINUTE) as stale'),
    )
  if (!row) return null
  if (Number(row.stale) === 1) await db('devices').where({ id: row.id }).update({ last_seen_at: db.raw('UTC_TIMESTAMP(3)') })
  return { id: row.id, kind: row.kind, name: row.name, boothId: row.booth_id, scaleId: row.scale_id }
}
