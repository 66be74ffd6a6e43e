/**
 * The little that screens do with decimals, on their digits: exact, and without the library that the engine reckons
 * with, which is as large as all the rest of a small screen.
 */

/** A plain decimal as whole units of 10^-scale. */
export interface Units {
  units: bigint
  scale: number
}

const PLAIN = /^([+-]?)(\d*)(?:\.(\d*))?$/

/**
 * Reads a plain decimal with a point: `-12.50` is -1250 units of 10^-2.
 * @throws RangeError for anything else
 */
export function unitsOf(value: string): Units {
  const [, sign = '', whole = '', fraction = ''] = PLAIN.exec(value) ?? []
  if (whole + fraction === '') throw new RangeError(`not a finite decimal: ${value}`)
  const units = BigInt(whole + fraction)
  return { units: sign === '-' ? -units : units, scale: fraction.length }
}

/** Ten to a whole power, not below 0. */
export const powerOfTen = (power: number): bigint => 10n ** BigInt(power)

/** Divides and rounds half away from zero. */
function divideHalfUp(units: bigint, divisor: bigint): bigint {
  const size = units < 0n ? -units : units
  const rounded = (size + divisor / 2n) / divisor
  return units < 0n ? -rounded : rounded
}

/**
 * The same value with so many decimals, rounded half away from zero.
 * @param decimals digits after the point, 0 or more
 */
export function withScale({ units, scale }: Units, decimals: number): Units {
  if (decimals >= scale) return { units: units * powerOfTen(decimals - scale), scale: decimals }
  return { units: divideHalfUp(units, powerOfTen(scale - decimals)), scale: decimals }
}

/** The size of a value as digits before and after the point, without its sign. */
export function digitsOf({ units, scale }: Units): { whole: string, fraction: string } {
  const digits = String(units < 0n ? -units : units).padStart(scale + 1, '0')
  return { whole: digits.slice(0, digits.length - scale), fraction: digits.slice(digits.length - scale) }
}

/** Decimals that a value needs: those that stand, without zeros at the end. `0.10` → 1. */
export function decimalsNeeded({ units, scale }: Units): number {
  let [rest, needed] = [units, scale]
  while (needed > 0 && rest % 10n === 0n) {
    rest /= 10n
    needed--
  }
  return needed
}

/** As it is written without zeros at the end. */
function textOf(read: Units): string {
  const { whole, fraction } = digitsOf(withScale(read, decimalsNeeded(read)))
  return `${read.units < 0n ? '-' : ''}${whole}${fraction && `.${fraction}`}`
}

/**
 * The exact sum of plain decimals, without zeros at the end; `0` of none.
 * @throws RangeError for anything else
 */
export function addUp(values: readonly string[]): string {
  const read = values.map(unitsOf)
  const scale = Math.max(0, ...read.map(one => one.scale))
  return textOf({ units: read.reduce((total, one) => total + withScale(one, scale).units, 0n), scale })
}

/**
 * A plain decimal with at most so many decimals, rounded half away from zero, without zeros at the end.
 * @throws RangeError for anything else
 */
export function roundedText(value: string, decimals: number): string {
  const read = unitsOf(value)
  return textOf(read.scale > decimals ? withScale(read, decimals) : read)
}

/**
 * Whether there is any of it.
 * @throws RangeError for anything but a plain decimal
 */
export const isMoreThanNone = (value: string): boolean => unitsOf(value).units > 0n
