import type { LivePot } from '../schemas/live'

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

const compareText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0)
