import type { Knex } from 'knex'
import { lastChangeOf } from '../repositories/audit'
import { Refusal } from './errors'
import { isDuplicate } from './transactions'

/**
 * The refusal of a change that was made to an older version: what stands now, who saved it and when.
 *
 * @param current the thing as the API answers it
 * @param subject `kind:id`, as its changes are audited
 */
export async function versionConflict(current: unknown, subject: string, db: Knex | Knex.Transaction): Promise<Refusal> {
  const changed = await lastChangeOf(subject, db)
  return new Refusal(409, 'version-conflict', 'Somebody else changed this meanwhile.', [], { current, changed })
}

/** The refusal of a second thing with the same code, name or number. */
export const duplicate = (path: string, message: string) => new Refusal(409, 'duplicate', message, [{ path, message }])

/**
 * Writes what a unique index guards.
 *
 * @param path field that holds what may be there once, `message` what to say where it is taken
 * @throws Refusal 409 `duplicate` for a second thing with the same code, name or number
 */
export async function uniquely(path: string, message: string, write: () => Promise<void>): Promise<void> {
  try {
    await write()
  } catch (error) {
    if (isDuplicate(error)) throw duplicate(path, message)
    throw error
  }
}

/** The refusal to take away or put aside what others still need. */
export const inUse = (message: string) => new Refusal(409, 'in-use', message)
