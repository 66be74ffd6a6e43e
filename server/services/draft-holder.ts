import type { Knex } from 'knex'
import type { Draft, DraftHolder } from '#shared/schemas/drafts'
import { findHolderNames, type StoredDraft } from '../repositories/drafts'
import { Refusal } from '../utils/errors'

/**
 * Whether a tablet may write a draft: the one that holds it, or one that takes it over with the next turn. A draft that
 * no tablet holds is anybody's.
 */
export function mayHold(stored: DraftHolder | null, asking: DraftHolder | null): boolean {
  if (stored === null) return true
  if (asking === null) return false
  return asking.turn > stored.turn || (asking.turn === stored.turn && asking.id === stored.id)
}

/** What a tablet is told that writes what another one has taken over, with what stands there now. */
export async function takenOver(stored: StoredDraft, current: Draft, db: Knex | Knex.Transaction): Promise<Refusal> {
  const { deviceName, userName } = await findHolderNames(stored, db)
  return new Refusal(409, 'taken-over', `${stored.code} was taken over at ${deviceName ?? 'another tablet'} by ${userName}.`, [], { current })
}
