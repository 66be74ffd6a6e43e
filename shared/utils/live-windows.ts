import { overcoatWindow } from '../engine/overcoat'
import { windowState, type OvercoatWindow, type WindowState } from '../engine/window-state'
import type { LiveWindow } from '../schemas/live'

/** A window as it stands at an instant. Instants are epoch milliseconds. */
export interface WindowNow extends OvercoatWindow {
  firstAt: number
  /** Where the last spray was not noted: the present, since it may be happening. */
  lastAt: number
  state: WindowState
}

const ms = (instant: string | null): number | null => (instant === null ? null : Date.parse(instant))

/**
 * The window at `now`, epoch milliseconds. While the last spray is not noted it opens ever later, so that nobody coats
 * too early.
 */
export function windowAt(window: LiveWindow, now: number): WindowNow {
  const firstAt = Date.parse(window.firstAt)
  const lastAt = window.unended ? Math.max(now, firstAt) : Date.parse(window.lastAt)
  const moved = window.unended ? overcoatWindow({ firstSprayedAt: firstAt, lastSprayedAt: lastAt, ...window.unended }) : standing(window)
  return { ...moved, firstAt, lastAt, state: windowState(moved, now) }
}

function standing({ opensAt, closingAt, closesAt }: LiveWindow): OvercoatWindow {
  const [opens, closes] = [Date.parse(opensAt), ms(closesAt)]
  return { opensAt: opens, closingAt: ms(closingAt), closesAt: closes, empty: closes !== null && closes <= opens }
}

/**
 * True when nothing that is mixed for the job will still be good when the window opens. `ends`: instants at which its
 * pots end, ISO 8601.
 */
export const needsFreshMix = (opensAt: number, ends: readonly (string | null)[]): boolean =>
  !ends.some((at) => at !== null && Date.parse(at) > opensAt)
