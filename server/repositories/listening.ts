import type { Knex } from 'knex'

/** Who holds a stream open: a session, a device, or both. */
export interface Listener {
  sessionId: string | null
  deviceId: string | null
}

/** True while the session is open and its person active, or, without a session, while the device is not revoked. */
export async function mayListen({ sessionId, deviceId }: Listener, db: Knex): Promise<boolean> {
  if (sessionId !== null) {
    const session = await db('sessions as s')
      .join('users as u', 'u.id', 's.user_id')
      .where({ 's.id': sessionId, 'u.active': true })
      .whereNull('s.ended_at')
      .where('s.expires_at', '>', db.raw('UTC_TIMESTAMP(3)'))
      .first('s.id')
    return session !== undefined
  }
  return deviceId !== null && (await db('devices').where({ id: deviceId }).whereNull('revoked_at').first('id')) !== undefined
}
