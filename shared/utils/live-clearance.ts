import type { LiveBooth, LivePot } from '../schemas/live'

/** What the strip over the pots of a booth says about its air. */
export interface KeepOut {
  /** `ahead`: isocyanates are mixed and not sprayed yet. The others as in the booth's clearance. */
  state: 'ahead' | 'spraying' | 'counting' | 'stopped'
  /** The extraction is off, or nobody knows: no time counts. */
  alarm: boolean
  /** Milliseconds until nobody needs the mask; null where nothing counts. */
  leftMs: number | null
  /** Instants in ISO 8601. */
  since: string | null
  lastShotAt: string | null
}

/**
 * Whether the booth may be entered without air-fed mask at `now`, epoch milliseconds; null where nothing speaks against
 * it.
 *
 * @param pots those that stand in this booth
 */
export function keepOut(booth: Pick<LiveBooth, 'clearance' | 'extraction'>, pots: readonly Pick<LivePot, 'containsIsocyanates'>[], now: number): KeepOut | null {
  const { clearance } = booth
  const alarm = booth.extraction !== 'running'
  if (clearance?.state === 'counting' && clearance.clearAt !== null) {
    const leftMs = Date.parse(clearance.clearAt) - now
    if (leftMs > 0) return { state: 'counting', alarm: false, leftMs, since: null, lastShotAt: clearance.lastShotAt }
  } else if (clearance) {
    return { state: clearance.state, alarm: alarm || clearance.state === 'stopped', leftMs: null, since: clearance.since, lastShotAt: clearance.lastShotAt }
  }
  if (!pots.some(({ containsIsocyanates }) => containsIsocyanates)) return null
  return { state: 'ahead', alarm: false, leftMs: null, since: null, lastShotAt: null }
}
