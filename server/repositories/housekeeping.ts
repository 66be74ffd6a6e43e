import type { Knex } from 'knex'
import { toInstant } from '../utils/rows'

type Db = Knex | Knex.Transaction

/** Takes away at most so many idempotency keys from before an instant (epoch milliseconds), the oldest first; returns how many. */
export function deleteKeysBefore(before: number, most: number, db: Db): Promise<number> {
  return db('idempotency_keys').where('created_at', '<', toInstant(before)).orderBy('created_at').limit(most).delete()
}

/**
 * Takes away at most so many sessions that ran out before an instant (epoch milliseconds); returns how many. The last
 * session of a person on a device stays: by it a bench knows who may be named as the mixer.
 */
export async function deleteSessionsBefore(before: number, most: number, db: Db): Promise<number> {
  const spent = await db('sessions as s')
    .where('s.expires_at', '<', toInstant(before))
    .where((part) => part.whereNull('s.device_id').orWhereExists((later) => later.select(db.raw('1')).from('sessions as l')
      .whereRaw('l.user_id = s.user_id AND l.device_id = s.device_id AND (l.created_at, l.id) > (s.created_at, s.id)')))
    .orderBy('s.id').limit(most).select<{ id: string }[]>('s.id')
  return spent.length === 0 ? 0 : db('sessions').whereIn('id', spent.map(({ id }) => id)).delete()
}

/** Takes away at most so many counts of wrong passwords whose time was over at an instant (epoch milliseconds); returns how many. */
export function deleteLimitsBefore(before: number, most: number, db: Db): Promise<number> {
  return db('sign_in_limits').where('expire', '<', before).limit(most).delete()
}
