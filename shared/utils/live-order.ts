import { windowState } from '../engine/window-state'
import type { LivePot, LiveWindow } from '../schemas/live'

const urgency: Record<LivePot['state'], number> = {
  'life-up': 0, 'closing': 1, 'fresh': 2, 'no-pot-life': 3, 'stopped': 4, 'emptied': 5,
}

/**
 * Pot life up first, then closing, then what ends soonest. Within a state the order never changes by itself: it hangs
 * on the end and the code only, never on the present moment.
 */
export function compareUrgency(a: LivePot, b: LivePot): number {
  return urgency[a.state] - urgency[b.state] || compareText(a.endsAt ?? '9', b.endsAt ?? '9') || compareText(a.code, b.code)
}

const windowUrgency = { 'closing': 0, 'open': 1, 'too-early': 2, 'missed': 3 } as const

/** Windows that close first stand first, then those that open next; what was missed waits for sanding at the end. */
export function compareWindows(now: number): (a: LiveWindow, b: LiveWindow) => number {
  const stateOf = ({ opensAt, closingAt, closesAt }: LiveWindow) =>
    windowState({ opensAt: Date.parse(opensAt), closingAt: ms(closingAt), closesAt: ms(closesAt), empty: false }, now)
  const next = (window: LiveWindow, state: keyof typeof windowUrgency) => (state === 'too-early' ? window.opensAt : window.closesAt ?? '9')
  return (a, b) => {
    const [of, than] = [stateOf(a), stateOf(b)]
    return windowUrgency[of] - windowUrgency[than] || compareText(next(a, of), next(b, than)) || compareText(a.id, b.id)
  }
}

const ms = (instant: string | null): number | null => (instant === null ? null : Date.parse(instant))
const compareText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)
