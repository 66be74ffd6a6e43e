/** The instants of a window, epoch milliseconds. `closesAt` null: it never closes. */
export interface WindowInstants {
  opensAt: number
  closingAt: number | null
  closesAt: number | null
}

export type WindowState = 'too-early' | 'open' | 'closing' | 'missed'

/**
 * What may be done at `now`. An instant belongs to what begins with it. A window that closes before it opens is
 * too early until it has closed, and missed from then on.
 */
export function windowStateAt({ opensAt, closingAt, closesAt }: WindowInstants, now: number): WindowState {
  if (closesAt !== null && now >= closesAt) return 'missed'
  if (now < opensAt) return 'too-early'
  return closingAt !== null && now >= closingAt ? 'closing' : 'open'
}
