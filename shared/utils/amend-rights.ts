import type { Role } from '../types/roles'
import { shopDate } from './zone'

/** Why a person may not amend a batch. */
export type AmendRefusal = 'other-person' | 'day-over'

/**
 * A sprayer amends what he mixed himself, until the end of the shop's day on which he mixed it; a foreman or manager
 * everything.
 *
 * @param mixedAt and `now` in epoch milliseconds
 * @returns null where it is allowed
 */
export function amendRefusal(
  user: { id: string; role: Role }, batch: { mixedByUserId: string; mixedAt: number }, zone: string, now: number,
): AmendRefusal | null {
  if (user.role !== 'sprayer') return null
  if (batch.mixedByUserId !== user.id) return 'other-person'
  return shopDate(now, zone) > shopDate(batch.mixedAt, zone) ? 'day-over' : null
}
