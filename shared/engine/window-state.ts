export interface OvercoatWindow {
  opensAt: number
  closesAt: number | null
  /** Null where it never closes and where it is empty. */
  closingAt: number | null
  /** Closes before it opens: to be said before the coat below is sprayed. */
  empty: boolean
}

export type WindowState = 'too-early' | 'open' | 'closing' | 'missed'

/**
 * *missed* from the close on, *closing* from `closingAt` on, *open* from the opening on. An empty window is too early
 * until it is missed.
 */
export function windowState({ opensAt, closesAt, closingAt }: OvercoatWindow, now: number): WindowState {
  if (closesAt !== null && now >= closesAt) return 'missed'
  if (now < opensAt) return 'too-early'
  return closingAt !== null && now >= closingAt ? 'closing' : 'open'
}
