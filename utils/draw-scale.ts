/** Shared arithmetic of the drawings. Everything here is pixels; quantities are printed from their own strings. */

/** Two decimals are finer than any screen. */
export const px = (value: number): number => Math.round(value * 100) / 100

export const clamp = (value: number, low: number, high: number): number => Math.min(high, Math.max(low, value))

export interface Tick {
  /** Place on the scale, in the unit of the scale. */
  at: number
  major: boolean
}

const NICE = [1, 2, 2.5, 5] as const

/** The smallest of 1, 2, 2.5, 5 × 10ⁿ that cuts `span` into at most `most` parts. */
export function niceStep(span: number, most: number): number {
  const least = span / Math.max(1, most)
  const power = 10 ** Math.floor(Math.log10(least))
  const found = NICE.find(step => step * power >= least - 1e-9 * power)
  return found === undefined ? 10 * power : found * power
}

/** The finest of a tenth, a fifth or a half of `major` whose ticks stand at least `leastPx` apart. */
export function minorStep(major: number, pxPerUnit: number, leastPx: number): number {
  const parts = [10, 5, 2].find(count => (major / count) * pxPerUnit >= leastPx)
  return parts === undefined ? major : major / parts
}

/** Ticks from `low` to `high`, both kept, in order. Counted, not added up, so that far ticks do not drift. */
export function ticksBetween(low: number, high: number, minor: number, major: number): Tick[] {
  const first = Math.ceil(low / minor - 1e-9)
  const last = Math.floor(high / minor + 1e-9)
  const perMajor = Math.round(major / minor)
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, place) => {
    const count = first + place
    return { at: count * minor, major: count % perMajor === 0 }
  })
}

/** Digits after the point that a scale with this step needs: 0.25 → 2, 0.5 → 1, 10 → 0. */
export function stepDecimals(step: number): number {
  return [0, 1, 2].find(digits => Math.abs(step * 10 ** digits - Math.round(step * 10 ** digits)) < 1e-6) ?? 3
}
