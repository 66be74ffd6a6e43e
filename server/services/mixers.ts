import type { Knex } from 'knex'
import { hasSignedInAt } from '../repositories/draft-references'
import type { Principal } from '../utils/context'
import { forbidden } from '../utils/errors'

/**
 * Who may write a batch that names `mixedByUserId`: that person; a foreman or manager, also to take over; a bench, for
 * anyone who has signed in on it, so that an expired session loses nothing. The server itself may do everything.
 *
 * @param storedMixerId whose batch it was until now, null for a new one
 * @throws Refusal 403 for everybody else
 */
export async function requireMixer(
  principal: Principal, mixedByUserId: string, storedMixerId: string | null, db: Knex | Knex.Transaction,
): Promise<void> {
  if (principal.kind === 'system') return
  const { user, device } = principal
  if (user && user.role !== 'sprayer') return
  const own = user?.id === mixedByUserId
  if (own && (storedMixerId === null || storedMixerId === user.id)) return
  const bench = device?.kind === 'bench' ? device : null
  if (bench && (own || (await hasSignedInAt(mixedByUserId, bench.id, db)))) return
  throw forbidden('This batch is another person\'s. A foreman can take it over, or take it over at a bench.')
}
