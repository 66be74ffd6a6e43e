import type { Knex } from 'knex'
import { isoOf } from '../utils/rows'

/** Who changed something last, and when. */
export interface LastChange {
  /** Null for a device, the system, or somebody who is not in the books any more. */
  name: string | null
  at: string
}

/** The latest audited change of a thing, or null where there is none. `subject` is `kind:id`. */
export async function lastChangeOf(subject: string, db: Knex | Knex.Transaction): Promise<LastChange | null> {
  const entry = await db('audit_entries').where({ subject }).orderBy('seq', 'desc').first<{ actor: string, at: Date } | undefined>('actor', 'at')
  if (!entry) return null
  const [kind, id] = entry.actor.split(':')
  const user = kind === 'user' && id ? await db('users').where({ id }).first<{ name: string } | undefined>('name') : undefined
  return { name: user?.name ?? null, at: isoOf(entry.at) }
}
