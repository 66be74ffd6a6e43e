import type { Knex } from 'knex'
import type { User } from '#shared/schemas/shop'
import { toInstant } from '../utils/rows'
import { headOf, page, type Head, type NamePage } from './shop'

type Db = Knex | Knex.Transaction

/** A person without what depends on the day. */
export type Person = Omit<User, 'isocyanateTraining'>

interface UserRow extends Head {
  email: string
  initials: string
  role: User['role']
  isocyanate_training_until: string | null
  must_change_password: number
  has_password: number
}

/** Passwords and PINs are not read at all, only whether there is one. */
const columns = (db: Db) => [
  ...['id', 'name', 'active', 'version', 'email', 'initials', 'role', 'isocyanate_training_until', 'must_change_password'].map(column => `users.${column}`),
  db.raw('(users.password_hash IS NOT NULL) as has_password'),
]

const toPerson = (row: UserRow): Person => ({
  ...headOf(row),
  email: row.email,
  initials: row.initials,
  role: row.role,
  isocyanateTrainingUntil: row.isocyanate_training_until,
  canSignIn: row.active === 1 && Number(row.has_password) === 1,
  mustChangePassword: row.must_change_password === 1,
})

/** People by name. */
export async function listUsers(options: NamePage, db: Db): Promise<Person[]> {
  const rows: UserRow[] = await page(db('users').select(columns(db)), 'users', options)
  return rows.map(toPerson)
}

export async function findPerson(id: string, db: Db): Promise<Person | null> {
  const row = await db('users').where({ id }).select(columns(db)).first<UserRow | undefined>()
  return row ? toPerson(row) : null
}

/** Ids of the managers who can sign in; their rows are held until the transaction ends, so that the last one stays. */
export async function holdManagers(trx: Knex.Transaction): Promise<string[]> {
  const rows = await trx('users').where({ role: 'manager', active: true }).whereNotNull('password_hash').orderBy('id').forUpdate()
    .select<{ id: string }[]>('id')
  return rows.map(({ id }) => id)
}

/** What the books keep of a person. */
export type PersonFacts = Pick<Person, 'name' | 'initials' | 'email' | 'role' | 'isocyanateTrainingUntil'>

const toRow = ({ name, initials, email, role, isocyanateTrainingUntil }: PersonFacts) =>
  ({ name, initials, email, role, isocyanate_training_until: isocyanateTrainingUntil })

/** Inserts a person whose first password somebody else knows. */
export async function insertPerson(id: string, facts: PersonFacts, passwordHash: string, now: number, db: Db): Promise<void> {
  const at = toInstant(now)
  await db('users').insert({ id, ...toRow(facts), password_hash: passwordHash, must_change_password: true, created_at: at, updated_at: at })
}

export async function updatePerson(id: string, facts: PersonFacts, active: boolean, now: number, db: Db): Promise<void> {
  await db('users').where({ id }).update({ ...toRow(facts), active, updated_at: toInstant(now), version: db.raw('version + 1') })
}

/** Sets a password. @param mustChange true where somebody else knows it */
export function updatePassword(id: string, passwordHash: string, mustChange: boolean, now: number, db: Db): Promise<number> {
  return db('users').where({ id }).update({
    password_hash: passwordHash, must_change_password: mustChange, demo_password: false, updated_at: toInstant(now), version: db.raw('version + 1'),
  })
}

/** Ends every open session of a person; returns their ids. */
export async function endSessionsOf(userId: string, reason: string, now: number, trx: Knex.Transaction): Promise<string[]> {
  const open = trx('sessions').where({ user_id: userId }).whereNull('ended_at')
  const rows = await open.clone().forUpdate().select<{ id: string }[]>('id')
  await open.update({ ended_at: toInstant(now), ended_reason: reason })
  return rows.map(({ id }) => id)
}
