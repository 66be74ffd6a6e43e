/** Chance that repeats itself: the same seed gives the same shop. Whole numbers only, so that no gram is ever a float. */
export interface Random {
  /** A whole number from 0 to `below` − 1. */
  below(below: number): number
  /** A whole number from `low` to `high`, both included. */
  between(low: number, high: number): number
  /** As `between`, but values near the middle come more often, as a hand at a scale does. */
  around(low: number, high: number): number
  pick<T>(list: readonly T[]): T
  /** True in so many of a thousand cases. */
  inThousand(share: number): boolean
}

const range = 0x1_0000_0000

/** @param seed any whole number */
export function randomOf(seed: number): Random {
  let state = seed >>> 0
  const word = (): number => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return (mixed ^ (mixed >>> 14)) >>> 0
  }
  const below = (count: number): number => {
    if (!Number.isSafeInteger(count) || count < 1 || count > range) throw new RangeError('below needs a whole number from 1 to 2^32')
    const limit = range - (range % count)
    for (;;) {
      const drawn = word()
      if (drawn < limit) return drawn % count
    }
  }
  const between = (low: number, high: number) => low + below(high - low + 1)
  return {
    below,
    between,
    around: (low, high) => Math.trunc((between(low, high) + between(low, high) + between(low, high)) / 3),
    pick: (list) => {
      const found = list[below(list.length)]
      if (found === undefined) throw new RangeError('nothing to pick from')
      return found
    },
    inThousand: (share) => below(1000) < share,
  }
}
