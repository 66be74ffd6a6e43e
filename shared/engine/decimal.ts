import { Decimal as DecimalBase } from 'decimal.js'
import { EngineError } from './error'

/** The engine's own decimal: 40 digits, half up, never an exponent in print. */
export const D = DecimalBase.clone({
  precision: 40,
  rounding: DecimalBase.ROUND_HALF_UP,
  toExpNeg: -9e15,
  toExpPos: 9e15,
})

export type Dec = DecimalBase

export const ZERO: Dec = new D(0)
export const ONE: Dec = new D(1)
export const HUNDRED: Dec = new D(100)

/** No quantity of a spray shop is larger, in any of the units used here. */
export const LARGEST: Dec = new D('1000000000')

const PLAIN = /^-?\d+(?:\.\d+)?$/
const LONGEST_TEXT = 40
const PRINTED_DECIMALS = 12
/** Six digits fewer than the precision: drops what repeated division leaves behind a true half. */
const SETTLED_DIGITS = 34

export interface Bounds {
  /** Smallest value allowed. */
  min?: Dec | string
  /** The value must be larger than this. */
  above?: Dec | string
  /** Largest value allowed; 10⁹ where not given. */
  max?: Dec | string
}

/**
 * Reads a plain decimal: digits, at most one point, a minus, at most 40 characters.
 * @throws EngineError `not-a-number`, `too-small`, `too-large`
 */
export function readDecimal(text: string, field: string, bounds: Bounds = {}): Dec {
  if (typeof text !== 'string' || text.length > LONGEST_TEXT || !PLAIN.test(text)) {
    throw new EngineError('not-a-number', field, 'Give a plain number with a point')
  }
  return within(new D(text), field, bounds)
}

/** As {@link readDecimal}, but more than 0. */
export function readPositive(text: string, field: string, max?: Dec | string): Dec {
  return readDecimal(text, field, max === undefined ? { above: ZERO } : { above: ZERO, max })
}

/** As {@link readDecimal}, but 0 or more. */
export function readNonNegative(text: string, field: string, max?: Dec | string): Dec {
  return readDecimal(text, field, max === undefined ? { min: ZERO } : { min: ZERO, max })
}

/** A per cent from 0 to 100, or above 0 where `above` says so. */
export function readPercent(text: string, field: string, above = false): Dec {
  return readDecimal(text, field, above ? { above: ZERO, max: HUNDRED } : { min: ZERO, max: HUNDRED })
}

function within(value: Dec, field: string, { min, above, max = LARGEST }: Bounds): Dec {
  const least = min ?? (above === undefined ? LARGEST.negated() : undefined)
  if (least !== undefined && value.lt(least)) {
    throw new EngineError('too-small', field, `Must be at least ${new D(least).toString()}`)
  }
  if (above !== undefined && value.lte(above)) {
    throw new EngineError('too-small', field, `Must be more than ${new D(above).toString()}`)
  }
  if (value.gt(max)) {
    throw new EngineError('too-large', field, `Must be at most ${new D(max).toString()}`)
  }
  return value
}

/** A whole number within bounds, given as a number because it counts things. */
export function readCount(count: number, field: string, max: number, min = 1): number {
  if (typeof count !== 'number' || count % 1 !== 0) {
    throw new EngineError('not-a-count', field, 'Give a whole number')
  }
  if (count < min || count > max) {
    throw new EngineError('count-out-of-range', field, `Must be from ${min} to ${max}`)
  }
  return count
}

/** Prints for JSON and SQL: at most 12 decimals, zeros stripped, no exponent. */
export function print(value: Dec): string {
  return value.toDecimalPlaces(PRINTED_DECIMALS).toString()
}

/** The nearest multiple of `division`, half up. This is the one rounding a target goes through. */
export function roundTo(value: Dec, division: Dec): Dec {
  return value.toSignificantDigits(SETTLED_DIGITS).toNearest(division, D.ROUND_HALF_UP)
}

/** The largest multiple of `division` not above `value`. */
export function floorTo(value: Dec, division: Dec): Dec {
  return value.toSignificantDigits(SETTLED_DIGITS).toNearest(division, D.ROUND_FLOOR)
}

/** The smallest multiple of `division` not below `value`. */
export function ceilTo(value: Dec, division: Dec): Dec {
  return value.toSignificantDigits(SETTLED_DIGITS).toNearest(division, D.ROUND_CEIL)
}

export function sum(values: readonly Dec[]): Dec {
  return values.reduce((total, value) => total.plus(value), ZERO)
}

/** `values` must not be empty. */
export function largest(values: readonly Dec[]): Dec {
  return values.reduce((most, value) => (value.gt(most) ? value : most))
}

/** A per cent as a share: 60 → 0.6. */
export function ofPercent(percent: Dec): Dec {
  return percent.div(HUNDRED)
}
