/** Grams as whole tenths: what a fine scale shows, and exact to add. */
export type Tenths = number

/** Tenths of a decimal that has at most one place after the point. */
export function tenthsOf(grams: string): Tenths {
  const match = /^(\d+)(?:\.(\d)0*)?$/.exec(grams)
  if (!match) throw new RangeError(`not grams on a tenth: ${grams}`)
  return parseInt(match[1] ?? '', 10) * 10 + parseInt(match[2] ?? '0', 10)
}

/** The plain decimal of the API: no empty fraction. */
export function gramsOf(tenths: Tenths): string {
  const whole = Math.trunc(tenths / 10)
  const rest = tenths % 10
  return rest === 0 ? `${whole}` : `${whole}.${rest}`
}

/** The multiple of `step` nearest to numerator ÷ denominator, half up. All above nothing. */
export function nearest(numerator: number, denominator: number, step: Tenths): Tenths {
  const unit = denominator * step
  return Math.trunc((2 * numerator + unit) / (2 * unit)) * step
}
