import type { Knex } from 'knex'
import type { PeopleList } from '#shared/schemas/shop'

type Db = Knex | Knex.Transaction

/** A shop has some dozens of people; no list of them is longer. */
const most = 200

/** Active people by name: what they are called and nothing else. */
export function listActivePeople(db: Db): Promise<PeopleList['items']> {
  return db('users').where({ active: true }).orderBy(['name', 'id']).limit(most).select<PeopleList['items']>('id', 'name', 'initials')
}

/** The name of an active person, or null. */
export async function activeName(id: string, db: Db): Promise<string | null> {
  return (await db('users').where({ id, active: true }).first<{ name: string } | undefined>('name'))?.name ?? null
}
