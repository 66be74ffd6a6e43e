import type { LiveSnapshot } from '#shared/schemas/live'
import { signedIn } from '../../server/support/http'

/**
 * Empties every pot of the shop but one, not weighed, so that a wall has a tile for it whatever other tests have mixed.
 *
 * @param code of the pot that stays
 */
export async function emptyAllBut(code: string): Promise<void> {
  const foreman = await signedIn('foreman')
  const { body } = await foreman.get<LiveSnapshot>('/api/live')
  for (const pot of body.pots.filter((one) => one.stage === 'sealed' && ['fresh', 'closing', 'life-up', 'no-pot-life'].includes(one.state) && one.code !== code)) {
    const { status } = await foreman.post(`/api/batches/${pot.id}/close`, { leftoverG: null })
    if (status !== 200) throw new Error(`${pot.code} could not be emptied: ${status}`)
  }
}
